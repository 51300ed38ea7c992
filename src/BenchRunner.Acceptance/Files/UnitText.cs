namespace BenchRunner.Acceptance.Files;

/// <summary>The units that files may use: SI, with a prefix where that is usual.</summary>
internal static class UnitText
{
    private static readonly (string Symbol, string Unit)[] _symbols =
    [
        ("V", "V"), ("A", "A"), ("s", "s"), ("Ohm", "Ohm"), ("Ω", "Ohm"), ("Ω", "Ohm"), ("H", "H"), ("F", "F"),
        ("J", "J"), ("Hz", "Hz"), ("C", "C"), ("K", "K"), ("K/W", "K/W"),
    ];

    private static readonly Dictionary<string, (string Name, string Example)> _names = new()
    {
        ["V"] = ("a voltage", "400 V"),
        ["A"] = ("a current", "20 A"),
        ["s"] = ("a time", "250 ns"),
        ["Ohm"] = ("a resistance", "10 mOhm"),
        ["H"] = ("an inductance", "3.3 uH"),
        ["F"] = ("a capacitance", "50 uF"),
        ["J"] = ("an energy", "705 uJ"),
        ["Hz"] = ("a frequency", "42 MHz"),
        ["C"] = ("a charge", "770 nC"),
        ["K"] = ("a temperature difference", "3 K"),
        ["degC"] = ("a temperature", "175 degC"),
        ["K/W"] = ("a thermal impedance", "0.45 K/W"),
        ["V/s"] = ("a voltage slope", "30 V/ns"),
        ["A/s"] = ("a current slope", "2 A/ns"),
        ["1"] = ("a ratio", "2 %"),
    };

    /// <summary>The SI units known, <c>1</c> for a ratio.</summary>
    public static IReadOnlyCollection<string> All => _names.Keys;

    /// <summary>What a unit measures, with its article: <c>a voltage</c>.</summary>
    public static string NameOf(string unit) =>
        _names.TryGetValue(unit, out var known) ? known.Name : $"a value in {unit}";

    /// <summary>A value as it might be written, e.g. <c>250 ns</c>.</summary>
    public static string ExampleOf(string unit) =>
        _names.TryGetValue(unit, out var known) ? known.Example : $"1 {unit}";

    /// <summary>The power of ten of a prefix; null where it is none. The empty prefix is 0.</summary>
    public static int? PowerOf(ReadOnlySpan<char> prefix) => prefix switch
    {
        "" => 0,
        "f" => -15,
        "p" => -12,
        "n" => -9,
        "u" or "µ" or "μ" => -6,
        "m" => -3,
        "k" => 3,
        "M" => 6,
        "G" => 9,
        "T" => 12,
        _ => null,
    };

    /// <summary>Reads a unit with its prefix, e.g. <c>uH</c> or <c>kV/us</c>.</summary>
    /// <returns>The SI unit and the power of ten that leads to it; null where the unit is unknown.</returns>
    public static (string Unit, int Power)? Parse(string text)
    {
        switch (text)
        {
            case "":
                return ("1", 0);
            case "%":
                return ("1", -2);
            case "degC" or "°C":
                return ("degC", 0);
        }

        if (Simple(text) is { } simple)
        {
            return simple;
        }

        // A slope: a voltage or a current over a time, each with its prefix.
        int slash = text.IndexOf('/');
        if (slash > 0
            && Simple(text[..slash]) is { Unit: "V" or "A" } above
            && Simple(text[(slash + 1)..]) is { Unit: "s" } below)
        {
            return (above.Unit + "/s", above.Power - below.Power);
        }

        return null;
    }

    private static (string Unit, int Power)? Simple(string text)
    {
        foreach ((string symbol, string unit) in _symbols)
        {
            if (text.EndsWith(symbol, StringComparison.Ordinal)
                && PowerOf(text.AsSpan(0, text.Length - symbol.Length)) is { } power)
            {
                return (unit, power);
            }
        }

        return null;
    }
}
