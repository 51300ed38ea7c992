namespace BenchRunner.Signals.Analysis;

/// <summary>An edge of the pulse train: its 50 % crossing and its departure, s.</summary>
/// <param name="At">The 50 % crossing of the gate, s.</param>
/// <param name="Departure">Where the gate left its level (10 % at turn-on, 90 % at turn-off), s; never after
/// <paramref name="At"/>.</param>
public readonly record struct PulseEdge(double At, double Departure);
