namespace BenchRunner.Benchmarks;

/// <summary>A group of benchmarks and what they share: records, a peer.</summary>
internal interface IGroup : IDisposable
{
    /// <summary>Its benchmarks, in the order in which they are run.</summary>
    IReadOnlyList<Benchmark> Benchmarks { get; }
}
