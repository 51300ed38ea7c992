using System.Globalization;

namespace FakeBench.Scpi;

/// <summary>How numbers and strings are said in a reply.</summary>
/// <remarks>Source: IEEE 488.2, 8.7 (from memory).</remarks>
public static class Numbers
{
    /// <summary>An integer (NR1).</summary>
    public static string Nr1(long value) => value.ToString(CultureInfo.InvariantCulture);

    /// <summary>A real number with exponent (NR3), e.g. <c>6.0E+02</c>; no number is 9.91E37.</summary>
    public static string Nr3(double value) =>
        (double.IsNaN(value) ? 9.91e37 : double.IsInfinity(value) ? Math.CopySign(9.9e37, value) : value)
        .ToString("0.0##############E+00", CultureInfo.InvariantCulture);

    /// <summary>A boolean: 1 or 0.</summary>
    public static string Boolean(bool value) => value ? "1" : "0";

    /// <summary>A string in double quotes; quotes inside are doubled, control characters replaced.</summary>
    public static string Quoted(string text)
    {
        string plain = string.Concat(text.Select(c => c is >= ' ' and <= '~' ? c : '?'));
        return $"\"{plain.Replace("\"", "\"\"", StringComparison.Ordinal)}\"";
    }
}
