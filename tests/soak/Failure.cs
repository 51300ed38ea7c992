namespace BenchRunner.Soak;

/// <summary>What went wrong with one mix.</summary>
/// <param name="Seed">Replays it: <c>--seed SEED --mixes 1</c>.</param>
/// <param name="What">What was found and what was due.</param>
internal sealed record Failure(ulong Seed, string What);
