namespace BenchRunner.Signals.Units;

/// <summary>A time, s, where a swap with another quantity would do damage: files and instrument roles. The default is 0
/// s.</summary>
/// <param name="Value">The time, s.</param>
public readonly record struct Seconds(double Value);
