namespace BenchRunner.Acceptance.Decisions;

/// <summary>What was decided about one device.</summary>
/// <param name="Outcome">The outcome.</param>
/// <param name="Reason">Why, in words; null for a plain acceptance.</param>
/// <param name="Values">Every quantity of every operating point.</param>
public sealed record DeviceDecision(Outcome Outcome, string? Reason, IReadOnlyList<MeasuredValue> Values);
