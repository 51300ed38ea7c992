using BenchRunner.Acceptance.Validity;

namespace BenchRunner.Runner.Points;

/// <summary>A capture has a finding of class stop: no further train is fired.</summary>
/// <param name="finding">The finding.</param>
public sealed class StopException(Finding finding) : Exception($"{finding.Criterion}: {finding.Message}")
{
    /// <summary>The finding.</summary>
    public Finding Finding { get; } = finding;
}
