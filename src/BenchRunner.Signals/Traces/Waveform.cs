namespace BenchRunner.Signals.Traces;

/// <summary>Channels of one pulse train on one uniform time grid, in V and A.</summary>
/// <remarks>
/// Immutable by convention: nobody writes into a channel's array after construction. An infinity or NaN is a clipped
/// sample. Not to be confused with <see cref="RawTrace"/>, which holds what the ADC gave.
/// </remarks>
public sealed class Waveform
{
    private readonly ChannelSamples?[] _channels = new ChannelSamples?[ChannelNames.All.Count];

    /// <summary>Makes a waveform of channels of equal length.</summary>
    /// <param name="timeOrigin">Time of the first sample, s.</param>
    /// <param name="sampleInterval">Sample interval, s; finite, above 0.</param>
    /// <param name="channels">The samples of each channel, V or A.</param>
    /// <param name="steps">The smallest step of the record of each channel (LSB), V or A; 0 or absent: found from the
    /// samples.</param>
    /// <exception cref="ArgumentException">No channel, or channels of different length.</exception>
    /// <exception cref="ArgumentOutOfRangeException">The sample interval is not finite and positive, or the origin not
    /// finite.</exception>
    public Waveform(
        double timeOrigin,
        double sampleInterval,
        IReadOnlyDictionary<Channel, double[]> channels,
        IReadOnlyDictionary<Channel, double>? steps = null)
        : this(timeOrigin, sampleInterval, channels?.Values.FirstOrDefault()?.Length ?? 0)
    {
        ArgumentNullException.ThrowIfNull(channels);
        if (channels.Count == 0)
        {
            throw new ArgumentException("A waveform needs at least one channel.", nameof(channels));
        }

        foreach ((Channel channel, double[] samples) in channels)
        {
            if (samples.Length != Count)
            {
                throw new ArgumentException(
                    $"{channel.Name()} has {samples.Length} samples where another channel has {Count}.",
                    nameof(channels));
            }

            double step = steps is not null && steps.TryGetValue(channel, out double stated) ? stated : 0;
            _channels[(int)channel] = new ChannelSamples(samples, Count, step);
        }
    }

    /// <summary>Makes a waveform of channels that may be codes still.</summary>
    internal Waveform(
        double timeOrigin, double sampleInterval, int count, IEnumerable<(Channel, ChannelSamples)> channels)
        : this(timeOrigin, sampleInterval, count)
    {
        foreach ((Channel channel, ChannelSamples samples) in channels)
        {
            _channels[(int)channel] = samples;
        }
    }

    private Waveform(double timeOrigin, double sampleInterval, int count)
    {
        if (!double.IsFinite(sampleInterval) || sampleInterval <= 0)
        {
            throw new ArgumentOutOfRangeException(
                nameof(sampleInterval), sampleInterval, "must be finite and above 0 s");
        }

        if (!double.IsFinite(timeOrigin))
        {
            throw new ArgumentOutOfRangeException(nameof(timeOrigin), timeOrigin, "must be finite");
        }

        (TimeOrigin, SampleInterval, Count) = (timeOrigin, sampleInterval, count);
    }

    /// <summary>Time of the first sample, s.</summary>
    public double TimeOrigin { get; }

    /// <summary>Sample interval, s.</summary>
    public double SampleInterval { get; }

    /// <summary>Samples a channel.</summary>
    public int Count { get; }

    /// <summary>The channels present, in the order of <see cref="ChannelNames.All"/>.</summary>
    public IEnumerable<Channel> Channels => ChannelNames.All.Where(Has);

    /// <summary>Whether a channel is present.</summary>
    public bool Has(Channel channel) => _channels[(int)channel] is not null;

    /// <summary>The samples of a channel, V or A; empty where the channel is absent.</summary>
    public ReadOnlySpan<double> this[Channel channel] =>
        _channels[(int)channel] is { } samples ? samples.Values : default;

    /// <summary>The smallest step of the record (LSB) of a channel, V or A; 0 where it was not stated.</summary>
    public double Step(Channel channel) => _channels[(int)channel]?.Step ?? 0;

    /// <summary>A channel that is present, with its codes where it has any.</summary>
    internal ChannelSamples At(Channel channel) => _channels[(int)channel]!;

    /// <summary>The same waveform with some channels replaced; the other channels are shared, not copied.</summary>
    internal Waveform With(IReadOnlyDictionary<Channel, ChannelSamples> channels) => channels.Count == 0
        ? this
        : new Waveform(
            TimeOrigin,
            SampleInterval,
            Count,
            Channels.Select(channel => (channel, channels.GetValueOrDefault(channel) ?? At(channel))));

    /// <summary>Time of a (fractional) sample index, s.</summary>
    public double TimeAt(double index) => TimeOrigin + (index * SampleInterval);
}
