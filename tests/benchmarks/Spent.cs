namespace BenchRunner.Benchmarks;

/// <summary>What a call of a work took.</summary>
/// <param name="Processor">Processor seconds of its process, the mean of the calls.</param>
/// <param name="LeastWall">Seconds by the wall clock, the least of the calls.</param>
internal readonly record struct Spent(double Processor, double LeastWall);
