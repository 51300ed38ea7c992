namespace FakeBench.Scpi;

/// <summary>One element of program data.</summary>
/// <param name="Kind">Its type.</param>
/// <param name="Text">Word, string without quotes, expression, block bytes as characters, or the number as
/// written.</param>
/// <param name="Value">Value of a number, before its suffix counts.</param>
/// <param name="Suffix">Suffix of a decimal number, upper case; empty: none.</param>
public sealed record ProgramData(DataKind Kind, string Text, double Value = 0, string Suffix = "")
{
    private static readonly (string Prefix, double Factor)[] Multipliers =
    [
        ("EX", 1e18), ("PE", 1e15), ("T", 1e12), ("G", 1e9), ("MA", 1e6), ("K", 1e3),
        ("M", 1e-3), ("U", 1e-6), ("N", 1e-9), ("P", 1e-12), ("F", 1e-15), ("A", 1e-18),
    ];

    /// <summary>Value in the base unit.</summary>
    /// <param name="unit">Unit that is due, upper case; empty: a bare number.</param>
    /// <exception cref="ScpiException">−104 for another type, −131 or −138 for a wrong suffix.</exception>
    /// <remarks>Source: IEEE 488.2, 7.7.3: M is milli, but mega before HZ and OHM.</remarks>
    public double Number(string unit)
    {
        if (Kind is not (DataKind.Real or DataKind.NonDecimal))
        {
            throw new ScpiException(-104, Text);
        }

        return Suffix.Length == 0 ? Value : Scaled(unit);
    }

    // Dividing by a power of ten that a double holds exactly gives 250 NS = 2.5E-7 to the last bit.
    private double Scaled(string unit)
    {
        if (unit.Length == 0)
        {
            throw new ScpiException(-138, Suffix);
        }

        if (!Suffix.EndsWith(unit, StringComparison.Ordinal))
        {
            throw new ScpiException(-131, Suffix);
        }

        string prefix = Suffix[..^unit.Length];
        if (prefix.Length == 0)
        {
            return Value;
        }

        if (prefix == "M" && unit is ("HZ" or "OHM"))
        {
            return Value * 1e6;
        }

        foreach ((string name, double factor) in Multipliers)
        {
            if (name == prefix)
            {
                return factor < 1 ? Value / Math.Round(1 / factor) : Value * factor;
            }
        }

        throw new ScpiException(-131, Suffix);
    }
}
