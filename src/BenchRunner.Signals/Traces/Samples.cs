namespace BenchRunner.Signals.Traces;

/// <summary>A stretch of one channel as the kernels see it: its values, and the ADC codes behind them where nothing but
/// a gain and an offset lies between.</summary>
/// <remarks>
/// With codes, sums are exact integers, scaled once at their end, and searches read a quarter of the memory. Every value
/// is code · gain + offset to the last bit, so a search among codes finds what a search among values finds; sums of
/// both agree to about 1e-13. A span of values alone is a stretch without codes.
/// </remarks>
public readonly ref struct Samples
{
    /// <summary>A stretch without codes.</summary>
    /// <param name="values">The values, V or A; finite.</param>
    public Samples(ReadOnlySpan<double> values) => Values = values;

    /// <summary>A stretch with the codes behind it, its values at hand already.</summary>
    /// <param name="values">The values, V or A: code · gain + offset, to the last bit.</param>
    /// <param name="codes">The codes, as many.</param>
    /// <param name="gain">Volts or amperes a code; finite, not 0.</param>
    /// <param name="offset">Value of code 0, V or A; finite.</param>
    internal Samples(ReadOnlySpan<double> values, ReadOnlySpan<short> codes, double gain, double offset)
    {
        Values = values;
        Codes = codes;
        Gain = gain;
        Offset = offset;
    }

    /// <summary>The values, V or A.</summary>
    public ReadOnlySpan<double> Values { get; }

    /// <summary>The codes behind the values; empty where there are none.</summary>
    public ReadOnlySpan<short> Codes { get; }

    /// <summary>Volts or amperes a code; meaningful with codes.</summary>
    public double Gain { get; }

    /// <summary>Value of code 0, V or A; meaningful with codes.</summary>
    public double Offset { get; }

    /// <summary>How many samples.</summary>
    public int Length => Values.Length;

    /// <summary>Whether there are codes behind the values.</summary>
    public bool HasCodes => !Codes.IsEmpty;

    /// <summary>A stretch of codes, with their values.</summary>
    /// <param name="codes">The codes.</param>
    /// <param name="gain">Volts or amperes a code; finite, not 0.</param>
    /// <param name="offset">Value of code 0, V or A; finite.</param>
    /// <exception cref="ArgumentOutOfRangeException">Gain or offset are not finite, or the gain is 0.</exception>
    public static Samples Of(ReadOnlySpan<short> codes, double gain, double offset)
    {
        if (!double.IsFinite(gain) || gain == 0 || !double.IsFinite(offset))
        {
            throw new ArgumentOutOfRangeException(nameof(gain), $"a gain of {gain} and an offset of {offset}");
        }

        double[] values = new double[codes.Length];
        CodeConversion.ToValues(codes, gain, offset, values);
        return new Samples(values, codes, gain, offset);
    }

    /// <summary>The value of a sample, V or A.</summary>
    public double this[int index] => Values[index];

    /// <summary>The value of a code, V or A; meaningful with codes.</summary>
    public double Value(int code) => (code * Gain) + Offset;

    /// <summary>A part of the stretch.</summary>
    public Samples Slice(int start, int length) => HasCodes
        ? new(Values.Slice(start, length), Codes.Slice(start, length), Gain, Offset)
        : new(Values.Slice(start, length));

    /// <summary>Values as a stretch without codes.</summary>
    public static implicit operator Samples(ReadOnlySpan<double> values) => new(values);

    /// <summary>Values as a stretch without codes.</summary>
    public static implicit operator Samples(double[] values) => new(values);
}
