namespace FakeBench.Scpi;

/// <summary>Bounds and unit of a numeric parameter.</summary>
/// <param name="Minimum">What <c>MINimum</c> means.</param>
/// <param name="Maximum">What <c>MAXimum</c> means.</param>
/// <param name="Default">What <c>DEFault</c> means, and the value after <c>*RST</c>.</param>
/// <param name="Unit">Base unit in upper case; empty: none.</param>
public sealed record NumericRange(double Minimum, double Maximum, double Default, string Unit = "")
{
    /// <summary>A mask register's range.</summary>
    public static NumericRange Mask(int maximum) => new(0, maximum, 0);

    /// <summary>The value of a parameter.</summary>
    /// <exception cref="ScpiException">−222 outside the bounds, −224 for a word that is none of the three.</exception>
    public double Read(ProgramData data)
    {
        double value = data.Kind == DataKind.Word ? Special(data.Text) : data.Number(Unit);
        return value >= Minimum && value <= Maximum
            ? value
            : throw new ScpiException(-222, $"{data.Text}, allowed {Numbers.Nr3(Minimum)} to {Numbers.Nr3(Maximum)}");
    }

    /// <summary>The value of a parameter that is due as an integer: rounded (IEEE 488.2, 7.7.2).</summary>
    public int ReadInteger(ProgramData data)
    {
        double value = data.Kind == DataKind.Word ? Special(data.Text) : data.Number(Unit);
        return (int)Read(
            new ProgramData(DataKind.NonDecimal, data.Text, Math.Round(value, MidpointRounding.AwayFromZero)));
    }

    private double Special(string word) => word switch
    {
        _ when Mnemonic.Is(word, "MINimum") => Minimum,
        _ when Mnemonic.Is(word, "MAXimum") => Maximum,
        _ when Mnemonic.Is(word, "DEFault") => Default,
        _ => throw new ScpiException(-224, word),
    };
}
