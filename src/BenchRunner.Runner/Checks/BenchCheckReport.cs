namespace BenchRunner.Runner.Checks;

/// <summary>What a check found of a bench.</summary>
/// <param name="Bench">The bench's name.</param>
/// <param name="Instruments">One a role.</param>
/// <param name="Latch">What the latch says that stands on the bench; null: none does.</param>
public sealed record BenchCheckReport(string Bench, IReadOnlyList<InstrumentCheck> Instruments, string? Latch)
{
    /// <summary>Whether a run may begin.</summary>
    public bool IsFit =>
        Latch is null && !Instruments.Any(i => i.Findings.Any(finding => finding.MakesUnfit));
}
