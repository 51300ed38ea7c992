namespace FakeBench.Scpi;

/// <summary>How a header relates to a pattern.</summary>
public enum HeaderMatch
{
    /// <summary>Another header.</summary>
    None,

    /// <summary>The header, but with a numeric suffix that the pattern does not have.</summary>
    SuffixOutOfRange,

    /// <summary>The header.</summary>
    Match,
}
