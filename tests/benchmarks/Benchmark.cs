namespace BenchRunner.Benchmarks;

/// <summary>How a work is measured.</summary>
/// <param name="Work">Name of the work; its goal is found by it.</param>
/// <param name="Measure">Measures it once.</param>
internal sealed record Benchmark(string Work, Func<Outcome> Measure);
