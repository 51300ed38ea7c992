namespace BenchRunner.Acceptance.Sequences;

/// <summary>A point of the transient thermal impedance.</summary>
/// <param name="Time">Pulse time, s; infinity for the steady state.</param>
/// <param name="Impedance">Impedance, K/W.</param>
public readonly record struct ThermalPoint(double Time, double Impedance);
