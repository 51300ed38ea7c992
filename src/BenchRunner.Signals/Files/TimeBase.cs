namespace BenchRunner.Signals.Files;

/// <summary>Start and interval of uniform times.</summary>
/// <param name="Origin">The first time, s.</param>
/// <param name="Interval">The interval, s.</param>
internal readonly record struct TimeBase(double Origin, double Interval);
