namespace BenchRunner.Signals.Analysis;

/// <summary>The current shunt: v = R i + L di/dt, undone as a first-order low-pass of τ = L/R.</summary>
/// <param name="Resistance">Resistance, Ω; above 0.</param>
/// <param name="Inductance">Series inductance, H; 0 or more. 0: nothing to undo.</param>
public sealed record Shunt(double Resistance, double Inductance);
