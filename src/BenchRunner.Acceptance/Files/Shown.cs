using System.Globalization;
using System.Text;

namespace BenchRunner.Acceptance.Files;

/// <summary>Text from a file as a message may show it: short, one line, nothing that acts on a terminal.</summary>
internal static class Shown
{
    /// <summary>The text in quotation marks.</summary>
    public static string Quote(string text) => $"'{Cut(text)}'";

    /// <summary>The text, cut and with control and direction characters escaped.</summary>
    public static string Cut(string text, int longest = 60)
    {
        var shown = new StringBuilder();
        foreach (char c in text.Length > longest ? text[..longest] : text)
        {
            if (Acts(c))
            {
                shown.Append(CultureInfo.InvariantCulture, $"\\u{(int)c:x4}");
            }
            else
            {
                shown.Append(c);
            }
        }

        return text.Length > longest ? shown.Append('…').ToString() : shown.ToString();
    }

    /// <summary>Whether a character can do something to a terminal, or cannot be seen.</summary>
    public static bool Acts(char c) => char.GetUnicodeCategory(c) is
        UnicodeCategory.Control or UnicodeCategory.Format or UnicodeCategory.Surrogate or
        UnicodeCategory.LineSeparator or UnicodeCategory.ParagraphSeparator;

    /// <summary>Words as a sentence lists them: <c>a, b or c</c>.</summary>
    public static string Or(IReadOnlyList<string> words) => words.Count switch
    {
        0 => "nothing",
        1 => words[0],
        _ => $"{string.Join(", ", words.Take(words.Count - 1))} or {words[^1]}",
    };
}
