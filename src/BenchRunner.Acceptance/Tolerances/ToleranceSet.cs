using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Tolerances;

/// <summary>What a tolerance file says: what must agree, how well, and where the figures come from.</summary>
/// <param name="Name">Its name.</param>
/// <param name="Basis">Where its figures come from.</param>
/// <param name="Limits">The tolerances; at least one.</param>
/// <param name="Source">The file's exact bytes.</param>
public sealed record ToleranceSet(string Name, string Basis, IReadOnlyList<Tolerance> Limits, SourceFile Source);
