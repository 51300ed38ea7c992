namespace BenchRunner.Benchmarks;

/// <summary>The peer failed; its row is not met.</summary>
/// <param name="what">What it said.</param>
internal sealed class PeerException(string what) : Exception($"the peer failed: {what}");
