namespace BenchRunner.Soak.Mixes;

/// <summary>A mix after its trial.</summary>
/// <param name="Mix">The mix.</param>
/// <param name="Log">What was said, with its simulated time: the same for the same seed.</param>
/// <param name="Wrong">What is wrong; empty: nothing.</param>
internal sealed record Judged(Mix Mix, IReadOnlyList<string> Log, string Wrong);
