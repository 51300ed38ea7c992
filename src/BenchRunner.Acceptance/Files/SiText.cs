using System.Globalization;

namespace BenchRunner.Acceptance.Files;

/// <summary>A value and its unit in one text, <c>3.3 uH</c>: read from files, written for people.</summary>
/// <remarks>
/// Reading is exact: the unit's power of ten is put into the exponent of the decimal text before that becomes a double,
/// so <c>3.3 uH</c> is 3.3E-06 and not 3.3 · 1E-06. Units: V A s Ohm H F J Hz C K degC K/W V/s A/s; a ratio is without
/// unit or in %.
/// </remarks>
public static class SiText
{
    private const string Prefixes = "fpnum kMGT";

    /// <summary>Reads a value with its unit.</summary>
    /// <param name="text">The text, e.g. <c>250 ns</c>; the space may be left out.</param>
    /// <param name="value">The value in SI (temperatures in degC), finite; 0 where there is none.</param>
    /// <param name="unit">Its SI unit, <c>1</c> for a ratio; empty where there is none.</param>
    /// <returns>Whether the text is a number and a known unit.</returns>
    public static bool TryParse(string text, out double value, out string unit)
    {
        ArgumentNullException.ThrowIfNull(text);
        value = 0;
        unit = "";
        int end = NumberEnd(text);
        if (end == 0 || UnitText.Parse(text[end..].TrimStart(' ')) is not { } known)
        {
            return false;
        }

        int mark = text.AsSpan(0, end).IndexOfAny('e', 'E');
        int power = known.Power;
        if (mark >= 0)
        {
            // Bounded, so that the sum below cannot overflow; beyond it no double is finite.
            ReadOnlySpan<char> digits = text.AsSpan(mark + 1, end - mark - 1);
            if (!int.TryParse(digits, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out int written)
                || Math.Abs((long)written) > 9999)
            {
                return false;
            }

            power += written;
        }

        string mantissa = text[..(mark >= 0 ? mark : end)];
        string shifted = string.Create(CultureInfo.InvariantCulture, $"{mantissa}E{power}");
        double parsed = double.Parse(shifted, NumberStyles.Float, CultureInfo.InvariantCulture);
        if (!double.IsFinite(parsed))
        {
            return false;
        }

        value = parsed;
        unit = known.Unit;
        return true;
    }

    /// <summary>Writes a value with the SI prefix that leaves 1 to 999 before the point: <c>41.9 MHz</c>.</summary>
    /// <param name="value">The value in SI.</param>
    /// <param name="unit">Its SI unit; <c>1</c> for a ratio, which is written without.</param>
    /// <param name="digits">Significant digits, 1 to 17; zeros at the end of a fraction are left out.</param>
    /// <returns>The text; <see cref="TryParse"/> reads it back to within the rounding if the value is finite.</returns>
    /// <exception cref="ArgumentOutOfRangeException">Digits below 1 or above 17.</exception>
    public static string Format(double value, string unit, int digits = 4)
    {
        ArgumentNullException.ThrowIfNull(unit);
        ArgumentOutOfRangeException.ThrowIfLessThan(digits, 1);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(digits, 17);
        string tail = unit == "1" ? "" : " " + unit;
        if (!double.IsFinite(value) || value == 0)
        {
            return (value == 0 ? "0" : value.ToString(CultureInfo.InvariantCulture)) + tail;
        }

        // d.dddE+eee: the rounding, and its carry, are done by the time the exponent is looked at.
        string form = string.Create(CultureInfo.InvariantCulture, $"E{digits - 1}");
        string rounded = Math.Abs(value).ToString(form, CultureInfo.InvariantCulture);
        int mark = rounded.IndexOf('E', StringComparison.Ordinal);
        string figures = rounded[..mark].Replace(".", "", StringComparison.Ordinal);
        int exponent = int.Parse(rounded.AsSpan(mark + 1), NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture);
        string sign = value < 0 ? "-" : "";
        if (unit is "1" or "%" or "degC" or "K" or "K/W")
        {
            return exponent is >= -5 and <= 8
                ? sign + Placed(figures, exponent) + tail
                : Power(sign, figures, exponent) + tail;
        }

        int group = (int)Math.Floor(exponent / 3.0);
        if (group is < -5 or > 4)
        {
            return Power(sign, figures, exponent) + tail;
        }

        string prefix = group == 0 ? "" : Prefixes[group + 5].ToString();
        return $"{sign}{Placed(figures, exponent - 3 * group)} {prefix}{unit}";
    }

    /// <summary>Writes a ratio in percent: <c>2 %</c>.</summary>
    /// <param name="ratio">The ratio, 1.</param>
    /// <param name="digits">Significant digits, 1 to 17.</param>
    /// <exception cref="ArgumentOutOfRangeException">Digits below 1 or above 17.</exception>
    public static string Percent(double ratio, int digits = 3) => Format(100 * ratio, "%", digits);

    /// <summary>Where the number at the start of a text ends; 0 where there is none.</summary>
    private static int NumberEnd(string text)
    {
        int at = text.Length > 0 && text[0] is '+' or '-' ? 1 : 0;
        int digits = Digits(text, ref at);
        if (at < text.Length && text[at] == '.')
        {
            at++;
            digits += Digits(text, ref at);
        }

        if (digits is 0 or > 60)
        {
            return 0;
        }

        if (at < text.Length && text[at] is 'e' or 'E')
        {
            int power = at + 1 < text.Length && text[at + 1] is '+' or '-' ? at + 2 : at + 1;
            if (Digits(text, ref power) > 0)
            {
                at = power;
            }
        }

        return at;
    }

    private static int Digits(string text, ref int at)
    {
        int start = at;
        while (at < text.Length && char.IsAsciiDigit(text[at]))
        {
            at++;
        }

        return at - start;
    }

    private static string Placed(string figures, int exponent)
    {
        if (exponent < 0)
        {
            return "0." + new string('0', -exponent - 1) + figures.TrimEnd('0');
        }

        string whole = figures.Length <= exponent ? figures.PadRight(exponent + 1, '0') : figures[..(exponent + 1)];
        string fraction = figures.Length <= exponent ? "" : figures[(exponent + 1)..].TrimEnd('0');
        return fraction.Length == 0 ? whole : $"{whole}.{fraction}";
    }

    private static string Power(string sign, string figures, int exponent) =>
        string.Create(CultureInfo.InvariantCulture, $"{sign}{Placed(figures, 0)}E{exponent}");
}
