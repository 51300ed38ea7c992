using BenchRunner.Acceptance.Decisions;

namespace BenchRunner.Runner.Devices;

/// <summary>How the road was broken off.</summary>
/// <param name="Outcome">The outcome, whatever was measured until then.</param>
/// <param name="Why">Why.</param>
public sealed record Ended(Outcome Outcome, string Why);
