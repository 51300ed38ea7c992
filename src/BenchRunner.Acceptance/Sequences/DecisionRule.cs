namespace BenchRunner.Acceptance.Sequences;

/// <summary>How a value and its uncertainty become a conformity (JCGM 106, ISO 14253-1).</summary>
/// <param name="Guarded">Whether the guard band is used; false: simple acceptance.</param>
/// <param name="Coverage">Coverage probability of the expanded uncertainty, 1.</param>
/// <param name="GuardFactor">Guard band in multiples of U (w = factor · U).</param>
public sealed record DecisionRule(bool Guarded = true, double Coverage = 0.95, double GuardFactor = 1);
