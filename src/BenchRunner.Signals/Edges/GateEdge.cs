namespace BenchRunner.Signals.Edges;

/// <summary>An edge of the gate in samples: its 50 % crossing, its departure, its direction.</summary>
/// <param name="At">Position of the 50 % crossing, in samples.</param>
/// <param name="Departure">Position where the gate left its level, in samples; never after
/// <paramref name="At"/>.</param>
/// <param name="Direction">Rising: turn-on.</param>
public readonly record struct GateEdge(double At, double Departure, CrossingDirection Direction);
