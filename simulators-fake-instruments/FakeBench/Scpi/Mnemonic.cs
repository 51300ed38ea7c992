namespace FakeBench.Scpi;

/// <summary>A keyword with short (upper case) and long form.</summary>
/// <remarks>Source: SCPI-1999 volume 1, 6.2: either form, nothing between, case-blind.</remarks>
public static class Mnemonic
{
    /// <summary>The short form that the rule gives a word: 4 letters, 3 where the fourth is a vowel.</summary>
    /// <example><c>VOLTAGE</c>: <c>VOLT</c>; <c>TIMER</c>: <c>TIM</c>; <c>TIME</c> has four letters and
    /// stays.</example>
    public static string ShortForm(string word) =>
        word.Length <= 4 ? word : "AEIOU".Contains(char.ToUpperInvariant(word[3])) ? word[..3] : word[..4];

    /// <summary>Whether a word is the short or long form of a keyword written as <c>VOLTage</c>.</summary>
    public static bool Is(string word, string keyword) =>
        word.Equals(keyword, StringComparison.OrdinalIgnoreCase)
        || word.Equals(Upper(keyword), StringComparison.OrdinalIgnoreCase);

    /// <summary>The short form written in upper case in a keyword like <c>VOLTage</c>.</summary>
    public static string Upper(string keyword) => string.Concat(keyword.TakeWhile(c => !char.IsAsciiLetterLower(c)));
}
