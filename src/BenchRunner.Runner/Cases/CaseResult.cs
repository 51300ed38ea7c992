using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Runner.Cases;

/// <summary>The one result of a case: one limit at one operating point for one device.</summary>
/// <param name="Device">Serial.</param>
/// <param name="Limit">The limit.</param>
/// <param name="Ending">How the case ended.</param>
/// <param name="Value">What was measured; null where nothing was.</param>
/// <param name="Reason">Why it is not decided; null where it is.</param>
public sealed record CaseResult(
    string Device, Limit Limit, CaseEnding Ending, MeasuredValue? Value, string? Reason);
