using System.Buffers.Text;
using System.Globalization;
using System.Text;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Files;

/// <summary>The small things of a text table: fields, numbers, and text that is safe to show.</summary>
internal static class Csv
{
    private const int MostShown = 40;

    /// <summary>Powers of ten that a double holds exactly.</summary>
    private static readonly double[] Exact =
    [
        1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
        1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22,
    ];

    /// <summary>The channels' names, as a message lists them.</summary>
    public static string Names { get; } = string.Join(", ", ChannelNames.All.Select(channel => channel.Name()));

    /// <summary>Takes the next field off a line.</summary>
    /// <param name="rest">The rest of the line; receives what follows the separator.</param>
    /// <param name="separator">The separator.</param>
    /// <param name="more">Receives whether a separator followed.</param>
    /// <returns>The field, with blanks and one pair of quotation marks around it removed.</returns>
    public static ReadOnlySpan<byte> Field(ref ReadOnlySpan<byte> rest, byte separator, out bool more)
    {
        int end = rest.IndexOf(separator);
        more = end >= 0;
        ReadOnlySpan<byte> field = more ? rest[..end] : rest;
        rest = more ? rest[(end + 1)..] : default;
        return Trim(field);
    }

    /// <summary>Whether a line holds nothing, or nothing but blanks and separators: spreadsheets leave such
    /// lines.</summary>
    public static bool IsEmpty(ReadOnlySpan<byte> line) => line.IndexOfAnyExcept(" ,;\t"u8) < 0;

    /// <summary>Reads a number; <c>inf</c>, <c>infinity</c> and <c>nan</c> in any case are numbers here.</summary>
    /// <param name="text">The field.</param>
    /// <param name="decimalComma">Whether a comma may be the decimal sign, beside the point.</param>
    /// <param name="value">Receives the number, correctly rounded.</param>
    /// <returns>Whether the field is one.</returns>
    public static bool TryNumber(ReadOnlySpan<byte> text, bool decimalComma, out double value)
    {
        byte comma = decimalComma ? (byte)',' : (byte)'.';
        int i = 0, digits = 0, scale = 0;
        ulong mantissa = 0;
        bool negative = text.Length > 0 && text[0] == '-', afterPoint = false;
        i += text.Length > 0 && text[0] is (byte)'-' or (byte)'+' ? 1 : 0;
        for (; i < text.Length; i++)
        {
            uint digit = (uint)(text[i] - '0');
            if (digit <= 9 && digits < 18)
            {
                mantissa = (mantissa * 10) + digit;
                digits++;
                scale -= afterPoint ? 1 : 0;
            }
            else if ((text[i] == '.' || text[i] == comma) && !afterPoint)
            {
                afterPoint = true;
            }
            else
            {
                break;
            }
        }

        if (digits > 0 && TryExponent(text[i..], out int exponent))
        {
            scale += exponent;
            // Whole number and power of ten are exact, so their one product or quotient is rounded correctly.
            if (mantissa <= 1UL << 53 && Math.Abs(scale) < Exact.Length)
            {
                value = scale < 0 ? mantissa / Exact[-scale] : mantissa * Exact[scale];
                value = negative ? -value : value;
                return true;
            }
        }

        return TrySlowly(text, decimalComma, out value);
    }

    /// <summary>Text as it may be shown: short, on one line, without control characters.</summary>
    public static string Show(ReadOnlySpan<byte> text) =>
        Show(Encoding.UTF8.GetString(text[..Math.Min(text.Length, 256)]));

    /// <summary>Text as it may be shown: short, on one line, without control characters.</summary>
    public static string Show(string text)
    {
        StringBuilder safe = new(MostShown);
        foreach (char c in text.AsSpan(0, Math.Min(text.Length, MostShown)))
        {
            safe.Append(char.IsControl(c) || char.IsSurrogate(c) ? '\uFFFD' : c);
        }

        return text.Length > MostShown ? safe.Append('…').ToString() : safe.ToString();
    }

    private static ReadOnlySpan<byte> Trim(ReadOnlySpan<byte> field)
    {
        field = field.Trim((byte)' ');
        return field.Length >= 2 && field[0] == '"' && field[^1] == '"' ? field[1..^1].Trim((byte)' ') : field;
    }

    private static bool TryExponent(ReadOnlySpan<byte> text, out int exponent)
    {
        exponent = 0;
        if (text.IsEmpty)
        {
            return true;
        }

        if (text[0] is not ((byte)'e' or (byte)'E'))
        {
            return false;
        }

        text = text[1..];
        text = text.Length > 1 && text[0] == '+' && text[1] != '-' ? text[1..] : text;
        return text.Length < 6 && Utf8Parser.TryParse(text, out exponent, out int used) && used == text.Length;
    }

    private static bool TrySlowly(ReadOnlySpan<byte> text, bool decimalComma, out double value)
    {
        const NumberStyles Style =
            NumberStyles.AllowLeadingSign | NumberStyles.AllowDecimalPoint | NumberStyles.AllowExponent;
        value = 0;
        if (text.IsEmpty || text.Length > 400)
        {
            return false;
        }

        Span<byte> copy = stackalloc byte[text.Length];
        text.CopyTo(copy);
        if (decimalComma)
        {
            copy.Replace((byte)',', (byte)'.');
        }

        return double.TryParse(copy, Style, CultureInfo.InvariantCulture, out value) || TryInfinity(copy, out value);
    }

    private static bool TryInfinity(ReadOnlySpan<byte> text, out double value)
    {
        bool negative = text[0] == '-';
        ReadOnlySpan<byte> name = text[0] is (byte)'-' or (byte)'+' ? text[1..] : text;
        value = negative ? double.NegativeInfinity : double.PositiveInfinity;
        return Ascii.EqualsIgnoreCase(name, "inf"u8);
    }
}
