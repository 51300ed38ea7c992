namespace BenchRunner.Runner.Checks;

/// <summary>What a check found of one instrument.</summary>
/// <param name="Role">Its role.</param>
/// <param name="Link">Its link.</param>
public sealed record InstrumentCheck(string Role, string Link)
{
    /// <summary>What it said it is; null where it was not reached.</summary>
    public string? Identity { get; init; }

    /// <summary>What its error queue held, oldest first.</summary>
    public IReadOnlyList<string> Errors { get; init; } = [];

    /// <summary>The answer to its self-test, 0 where it passed; null where its dialect has none or it was left
    /// out.</summary>
    public long? SelfTest { get; init; }

    /// <summary>Settings that matter to a run, as read: name to value.</summary>
    public IReadOnlyDictionary<string, string> Settings { get; init; } = new Dictionary<string, string>();

    /// <summary>Median time of a question, s; NaN where none was answered.</summary>
    public double LatencyMedian { get; init; } = double.NaN;

    /// <summary>Longest time of a question, s; NaN where none was answered.</summary>
    public double LatencyMost { get; init; } = double.NaN;

    /// <summary>What was found.</summary>
    public IReadOnlyList<CheckFinding> Findings { get; init; } = [];
}
