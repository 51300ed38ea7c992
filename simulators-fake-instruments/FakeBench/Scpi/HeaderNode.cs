using System.Globalization;

namespace FakeBench.Scpi;

/// <summary>One node of a header pattern, e.g. <c>PULSe&lt;1|2&gt;</c>.</summary>
/// <param name="Keyword">Keyword with its short form in upper case.</param>
/// <param name="Optional">Whether it may be left out.</param>
/// <param name="Suffixes">Numeric suffixes it has; empty: none to choose from, so only 1.</param>
internal sealed record HeaderNode(string Keyword, bool Optional, IReadOnlyList<int> Suffixes)
{
    private readonly string _short = Mnemonic.Upper(Keyword);

    /// <summary>Compares one node of a header.</summary>
    public HeaderMatch Compare(ReadOnlySpan<char> written, out int suffix)
    {
        int letters = written.Length;
        while (letters > 0 && char.IsAsciiDigit(written[letters - 1]))
        {
            letters--;
        }

        suffix = 1;
        ReadOnlySpan<char> word = written[..letters];
        bool same = word.Equals(_short, StringComparison.OrdinalIgnoreCase)
            || word.Equals(Keyword, StringComparison.OrdinalIgnoreCase);
        if (!same)
        {
            return HeaderMatch.None;
        }

        if (letters < written.Length && !int.TryParse(written[letters..], CultureInfo.InvariantCulture, out suffix))
        {
            return HeaderMatch.SuffixOutOfRange;
        }

        bool known = Suffixes.Count == 0 ? suffix == 1 : Suffixes.Contains(suffix);
        return known ? HeaderMatch.Match : HeaderMatch.SuffixOutOfRange;
    }
}
