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

    /// <summary>The operating point was not reached, or gave no valid capture.</summary>
    NotMeasured,
}
