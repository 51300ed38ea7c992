namespace BenchRunner.Acceptance.Plans;

/// <summary>A criterion of validity that captures of a plan cannot be judged by; it never counts as met.</summary>
/// <param name="Criterion">The criterion, e.g. <c>bus-droop</c>.</param>
/// <param name="Because">Why, in words.</param>
public sealed record NotEvaluated(string Criterion, string Because);
