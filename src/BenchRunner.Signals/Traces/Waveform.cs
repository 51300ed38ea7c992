namespace BenchRunner.Signals.Traces;

/// <summary>Channels of one pulse train on one uniform time grid, in V and A.</summary>
/// <remarks>
/// Immutable by convention: nobody writes into a channel's array after construction. An infinity or NaN is a clipped
/// sample. Not to be confused with <see cref="RawTrace"/>, which holds what the ADC gave.
/// </remarks>
public sealed class Waveform
{
    private readonly double[]?[] _samples = new double[]?[ChannelNames.All.Count];
    private readonly double[] _step = new double[ChannelNames.All.Count];

    /// <summary>Makes a waveform of channels of equal length.</summary>
    /// <param name="timeOrigin">Time of the first sample, s.</param>
    /// <param name="sampleInterval">Sample interval, s; finite, above 0.</param>
    /// <param name="channels">The samples of each channel, V or A.</param>
    /// <param name="steps">The smallest step of the record of each channel (LSB), V or A; 0 or absent: found from the
    /// samples.</param>
    /// <exception cref="ArgumentException">No channel, or channels of different length.</exception>
    /// <exception cref="ArgumentOutOfRangeException">The sample interval is not finite and positive.</exception>
    public Waveform(
        double timeOrigin,
        double sampleInterval,
        IReadOnlyDictionary<Channel, double[]> channels,
        IReadOnlyDictionary<Channel, double>? steps = null)
    {
        ArgumentNullException.ThrowIfNull(channels);
        if (!double.IsFinite(sampleInterval) || sampleInterval <= 0)
        {
            throw new ArgumentOutOfRangeException(
                nameof(sampleInterval), sampleInterval, "must be finite and above 0 s");
        }

        if (channels.Count == 0)
        {
            throw new ArgumentException("A waveform needs at least one channel.", nameof(channels));
        }

        TimeOrigin = timeOrigin;
        SampleInterval = sampleInterval;
        Count = channels.Values.First().Length;
        foreach ((Channel channel, double[] samples) in channels)
        {
            if (samples.Length != Count)
            {
                throw new ArgumentException(
                    $"{channel.Name()} has {samples.Length} samples where another channel has {Count}.",
                    nameof(channels));
            }

            _samples[(int)channel] = samples;
        }

        foreach ((Channel channel, double step) in steps ?? new Dictionary<Channel, double>())
        {
            _step[(int)channel] = step;
        }
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
    public bool Has(Channel channel) => _samples[(int)channel] is not null;

    /// <summary>The samples of a channel, V or A; empty where the channel is absent.</summary>
    public ReadOnlySpan<double> this[Channel channel] => _samples[(int)channel];

    /// <summary>The smallest step of the record (LSB) of a channel, V or A; 0 where it was not stated.</summary>
    public double Step(Channel channel) => _step[(int)channel];

    /// <summary>The same waveform with some channels replaced; the other channels are shared, not copied.</summary>
    /// <param name="channels">New samples of channels that the waveform has, V or A.</param>
    /// <param name="steps">New steps of those channels, V or A; absent: as they were.</param>
    /// <exception cref="ArgumentException">A channel of another length.</exception>
    public Waveform With(
        IReadOnlyDictionary<Channel, double[]> channels, IReadOnlyDictionary<Channel, double>? steps = null)
    {
        ArgumentNullException.ThrowIfNull(channels);
        Dictionary<Channel, double[]> all = [];
        Dictionary<Channel, double> allSteps = [];
        foreach (Channel channel in Channels)
        {
            all[channel] = channels.GetValueOrDefault(channel) ?? _samples[(int)channel]!;
            allSteps[channel] = steps is not null && steps.TryGetValue(channel, out double step) ? step : Step(channel);
        }

        return new Waveform(TimeOrigin, SampleInterval, all, allSteps);
    }

    /// <summary>Time of a (fractional) sample index, s.</summary>
    public double TimeAt(double index) => TimeOrigin + (index * SampleInterval);
}
