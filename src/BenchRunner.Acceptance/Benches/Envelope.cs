namespace BenchRunner.Acceptance.Benches;

/// <summary>The hard ceiling of a bench.</summary>
/// <param name="Voltage">Highest bus voltage, V; the over-voltage protection is set by it too.</param>
/// <param name="Current">Highest load current, A.</param>
/// <param name="Energy">Highest energy in the bank, J.</param>
/// <param name="Pulse">Longest single pulse, s.</param>
/// <param name="Temperature">Highest temperature of the plate, degC; null: not stated, the plate is not heated.</param>
public sealed record Envelope(
    double Voltage, double Current, double Energy, double Pulse, double? Temperature = null);
