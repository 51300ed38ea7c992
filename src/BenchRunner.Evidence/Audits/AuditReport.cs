namespace BenchRunner.Evidence.Audits;

/// <summary>What an audit found.</summary>
/// <param name="Runs">Runs in the file.</param>
/// <param name="Captures">Captures whose traces were read.</param>
/// <param name="LastSeals">The last seal of each origin: kept outside, it shows later that nothing was cut off.</param>
/// <param name="Problems">All problems.</param>
public sealed record AuditReport(
    int Runs, int Captures, IReadOnlyList<string> LastSeals, IReadOnlyList<AuditProblem> Problems)
{
    /// <summary>Whether nothing stored was altered, lost or half-written, as far as the file itself can show.</summary>
    public bool Ok => Problems.Count == 0;
}
