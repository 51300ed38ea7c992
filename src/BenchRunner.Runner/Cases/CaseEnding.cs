namespace BenchRunner.Runner.Cases;

/// <summary>How a case ended.</summary>
public enum CaseEnding
{
    /// <summary>The value conforms.</summary>
    Conforms,

    /// <summary>The value fails.</summary>
    Fails,

    /// <summary>The value was formed, or should have been, and is not decided.</summary>
    Undecided,

    /// <summary>The operating point gave too few valid captures, or was not reached.</summary>
    NotMeasured,

    /// <summary>The case itself broke: a fault of ours, which hides no other case.</summary>
    Broken,
}
