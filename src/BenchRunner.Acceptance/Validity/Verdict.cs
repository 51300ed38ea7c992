namespace BenchRunner.Acceptance.Validity;

/// <summary>What validity says of one capture.</summary>
/// <param name="Findings">All findings.</param>
/// <param name="NotEvaluated">Criteria that could not be evaluated (channel missing, not yet supported); never counted
/// as met.</param>
/// <param name="CorrectedFirstPulse">Width of the first pulse that the next capture should use, s; null:
/// unchanged.</param>
/// <param name="NextRange">Channels whose next range is wider (true) or narrower (false).</param>
public sealed record Verdict(
    IReadOnlyList<Finding> Findings,
    IReadOnlyList<string> NotEvaluated,
    double? CorrectedFirstPulse,
    IReadOnlyDictionary<Signals.Traces.Channel, bool> NextRange)
{
    /// <summary>Whether the capture counts: no finding of class retry or stop.</summary>
    public bool IsValid => Findings.All(finding => finding.Class == FindingClass.Warn);

    /// <summary>The first finding that stops the run; null where there is none.</summary>
    public Finding? Stop => Findings.FirstOrDefault(finding => finding.Class == FindingClass.Stop);
}
