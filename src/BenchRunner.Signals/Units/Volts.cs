namespace BenchRunner.Signals.Units;

/// <summary>A voltage, V, where a swap with another quantity would do damage: files and instrument roles. The default
/// is 0 V.</summary>
/// <param name="Value">The voltage, V.</param>
public readonly record struct Volts(double Value);
