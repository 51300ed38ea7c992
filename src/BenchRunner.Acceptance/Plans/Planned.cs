using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Plans;

/// <summary>What planning gave: the plan as far as it could be formed, and every refusal.</summary>
/// <param name="Plan">The plan; null where it could not be formed at all.</param>
/// <param name="Refusals">Why it must not be run; empty where it may.</param>
public sealed record Planned(Plan? Plan, IReadOnlyList<Problem> Refusals)
{
    /// <summary>What a person should know and nothing refuses: what a probe leaves unsaid, an edge it lengthens.</summary>
    public IReadOnlyList<Problem> Notes { get; init; } = [];
}
