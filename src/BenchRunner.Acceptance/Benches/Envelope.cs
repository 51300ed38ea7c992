namespace BenchRunner.Acceptance.Benches;

/// <summary>The hard ceiling of a bench.</summary>
/// <param name="Voltage">Highest bus voltage, V; the over-voltage protection is set by it too.</param>
/// <param name="Current">Highest load current, A.</param>
/// <param name="Energy">Highest energy in the bank, J.</param>
/// <param name="Pulse">Longest single pulse, s.</param>
public sealed record Envelope(double Voltage, double Current, double Energy, double Pulse);
