namespace BenchRunner.Signals.Units;

/// <summary>A current, A, where a swap with another quantity would do damage: files and instrument roles. The default
/// is 0 A.</summary>
/// <param name="Value">The current, A.</param>
public readonly record struct Amperes(double Value);
