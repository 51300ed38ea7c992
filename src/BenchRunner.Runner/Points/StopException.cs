using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Validity;

namespace BenchRunner.Runner.Points;

/// <summary>A capture has a finding of class stop: no further train is fired.</summary>
/// <param name="stop">What it means for the device, and the finding that says so.</param>
public sealed class StopException((Outcome Outcome, Finding Cause) stop)
    : Exception($"{stop.Cause.Criterion}: {stop.Cause.Message}")
{
    /// <summary>What it means for the device.</summary>
    public Outcome Outcome { get; } = stop.Outcome;
}
