using System.Globalization;
using System.Text;

namespace BenchRunner.Instruments.Replies;

/// <summary>What an instrument sent, made fit for a line of a log: one line, no control of the terminal, a bound on
/// its length.</summary>
public static class Printable
{
    /// <summary>Escapes control characters, line separators, marks of writing direction and lone surrogates as
    /// <c>\uXXXX</c>.</summary>
    /// <param name="text">What was sent.</param>
    /// <param name="limit">Longest text taken, in characters; the rest becomes an ellipsis.</param>
    public static string Text(string text, int limit = 256)
    {
        ArgumentNullException.ThrowIfNull(text);
        var shown = new StringBuilder(Math.Min(text.Length, limit) + 1);
        for (var i = 0; i < text.Length; i++)
        {
            if (i == limit)
            {
                return shown.Append('…').ToString();
            }

            var c = text[i];
            if (char.IsHighSurrogate(c) && i + 1 < text.Length && char.IsLowSurrogate(text[i + 1]) && i + 1 < limit)
            {
                shown.Append(c).Append(text[++i]);
            }
            else if (IsUnsafe(c))
            {
                shown.Append("\\u").Append(((int)c).ToString("X4", CultureInfo.InvariantCulture));
            }
            else
            {
                shown.Append(c);
            }
        }

        return shown.ToString();
    }

    /// <summary>Raw bytes, one character a byte; what is not printable is left to <see cref="Text"/>.</summary>
    internal static string Latin(ReadOnlySpan<byte> bytes, int limit) =>
        Encoding.Latin1.GetString(bytes[..Math.Min(bytes.Length, limit + 1)]);

    private static bool IsUnsafe(char c) => char.GetUnicodeCategory(c) is
        UnicodeCategory.Control or UnicodeCategory.Format or UnicodeCategory.Surrogate or
        UnicodeCategory.LineSeparator or UnicodeCategory.ParagraphSeparator;
}
