namespace FakeBench.Probes;

/// <summary>The converter of one scope channel: signed codes, clipped at the rails.</summary>
/// <param name="Bits">8 or 12.</param>
/// <param name="Span">From rail to rail, V or A; above 0.</param>
/// <param name="Centre">Value of code 0, V or A.</param>
public sealed record Digitiser(int Bits, double Span, double Centre)
{
    /// <summary>One code, V or A.</summary>
    public double Step => Span / (1 << Bits);

    /// <summary>The lowest code.</summary>
    public short Lowest => (short)-(1 << (Bits - 1));

    /// <summary>The highest code.</summary>
    public short Highest => (short)((1 << (Bits - 1)) - 1);

    /// <summary>The nearest code, or the rail.</summary>
    public short Code(double value)
    {
        double code = Math.Floor((value - Centre) / Step + 0.5);
        return (short)Math.Clamp(code, Lowest, Highest);
    }

    /// <summary>The nearest code of each value, or the rail.</summary>
    /// <param name="values">V or A.</param>
    /// <param name="codes">Receives the codes; as long as the values.</param>
    public void Code(ReadOnlySpan<double> values, Span<short> codes)
    {
        double step = Step, lowest = Lowest, highest = Highest;
        for (int i = 0; i < values.Length; i++)
        {
            double code = Math.Floor((values[i] - Centre) / step + 0.5);
            codes[i] = (short)(int)Math.Min(Math.Max(code, lowest), highest);
        }
    }

    /// <summary>The value that a code stands for, V or A.</summary>
    public double Value(short code) => Centre + code * Step;
}
