namespace BenchRunner.Signals.Traces;

/// <summary>The samples of one channel: values, or ADC codes with gain and offset, which become values when they are
/// first asked for.</summary>
internal sealed class ChannelSamples
{
    private readonly int _count;
    private readonly short[]? _codes;
    private readonly SampleBuffers? _buffers;
    private double[]? _values;

    /// <summary>A channel of values.</summary>
    /// <param name="values">The values, V or A; may be longer.</param>
    /// <param name="count">How many samples.</param>
    /// <param name="step">Smallest step of the record (LSB), V or A; 0: not stated.</param>
    /// <param name="buffers">Where copies of it come from; null: made anew.</param>
    public ChannelSamples(double[] values, int count, double step, SampleBuffers? buffers = null)
    {
        (_values, _count, Step, _buffers) = (values, count, step, buffers);
    }

    private ChannelSamples(
        short[] codes, double gain, double offset, double step, SampleBuffers? buffers)
    {
        (_codes, _count, Gain, Offset, Step, _buffers) = (codes, codes.Length, gain, offset, step, buffers);
    }

    /// <summary>Whether there are codes: then every value is code · gain + offset, and finite.</summary>
    public bool HasCodes => _codes is not null;

    /// <summary>Smallest step of the record (LSB), V or A; 0 where it was not stated.</summary>
    public double Step { get; }

    /// <summary>The values, V or A.</summary>
    public ReadOnlySpan<double> Values => (_values ??= Convert()).AsSpan(0, _count);

    /// <summary>Values and codes.</summary>
    public Samples All => HasCodes ? new Samples(Values, _codes, Gain, Offset) : new Samples(Values);

    private double Gain { get; }

    private double Offset { get; }

    /// <summary>A channel of codes; of values, where gain and offset make none that kernels could reckon with.</summary>
    /// <param name="codes">The codes; not modified.</param>
    /// <param name="gain">Volts or amperes a code.</param>
    /// <param name="offset">Value of code 0, V or A.</param>
    /// <param name="step">Smallest step of the record (LSB), V or A.</param>
    /// <param name="buffers">Where arrays come from; null: made anew.</param>
    public static ChannelSamples Of(short[] codes, double gain, double offset, double step, SampleBuffers? buffers)
    {
        ChannelSamples coded = new(codes, gain, offset, step, buffers);
        bool sound = codes.Length > 0 && gain != 0
            && double.IsFinite((short.MinValue * gain) + offset) && double.IsFinite((short.MaxValue * gain) + offset);
        return sound ? coded : new ChannelSamples(coded.Convert(), codes.Length, step, buffers);
    }

    /// <summary>The same channel after an offset was taken off and a gain divided out.</summary>
    /// <param name="offset">What was recorded for 0, V or A.</param>
    /// <param name="gain">Recorded over true; not 0.</param>
    public ChannelSamples Undo(double offset, double gain)
    {
        double step = Step / Math.Abs(gain);
        if (_codes is not null)
        {
            return Of(_codes, Gain / gain, (Offset - offset) / gain, step, _buffers);
        }

        double[] undone = Array();
        ReadOnlySpan<double> values = Values;
        for (int i = 0; i < values.Length; i++)
        {
            undone[i] = (values[i] - offset) / gain;
        }

        return new ChannelSamples(undone, _count, step, _buffers);
    }

    /// <summary>The same channel after a filter that takes samples from their places: values alone.</summary>
    /// <param name="filter">Fills its second argument from its first, of equal length.</param>
    public ChannelSamples Filtered(Action<ReadOnlySpan<double>, Span<double>> filter)
    {
        double[] filtered = Array();
        filter(Values, filtered.AsSpan(0, _count));
        return new ChannelSamples(filtered, _count, Step, _buffers);
    }

    private double[] Convert()
    {
        double[] values = Array();
        CodeConversion.ToValues(_codes, Gain, Offset, values.AsSpan(0, _count));
        return values;
    }

    private double[] Array() => _buffers?.Rent(_count) ?? GC.AllocateUninitializedArray<double>(_count);
}
