namespace BenchRunner.Instruments.Replies;

/// <summary>The two spellings of a SCPI word (SCPI-1999 volume 1, 6.2.1): instruments answer with the short
/// one.</summary>
public static class Mnemonic
{
    /// <summary>The short form: the first four letters, three where the fourth is a vowel; a word of four or fewer is
    /// its own.</summary>
    /// <param name="word">The long form, e.g. <c>VOLTage</c>; a number at its end stays.</param>
    public static string ShortForm(string word)
    {
        ArgumentNullException.ThrowIfNull(word);
        var letters = word.AsSpan().TrimEnd("0123456789").Length;
        var suffix = word[letters..];
        var upper = word[..letters].ToUpperInvariant();
        if (upper.Length > 4)
        {
            upper = upper[..("AEIOU".Contains(upper[3], StringComparison.Ordinal) ? 3 : 4)];
        }

        return upper + suffix;
    }

    /// <summary>Whether an answer is this word in its long or its short form, whatever the case. Nothing between
    /// is.</summary>
    /// <param name="word">The long form.</param>
    /// <param name="answer">What the instrument answered; no number at the end means 1.</param>
    public static bool Matches(string word, string answer)
    {
        ArgumentNullException.ThrowIfNull(word);
        ArgumentNullException.ThrowIfNull(answer);
        var wanted = Numbered(word);
        var given = Numbered(answer);
        return string.Equals(wanted, given, StringComparison.OrdinalIgnoreCase)
            || string.Equals(ShortForm(wanted), given, StringComparison.OrdinalIgnoreCase);
    }

    private static string Numbered(string word) =>
        word.Length > 0 && char.IsAsciiDigit(word[^1]) ? word : word + "1";
}
