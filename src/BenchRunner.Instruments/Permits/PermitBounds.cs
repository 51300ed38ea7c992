using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Permits;

/// <summary>How far a permit goes: the least of the ratings of bench, device, gate and sequence.</summary>
/// <param name="OperatingPoint">The operating point it was granted for.</param>
/// <param name="Voltage">Highest bus voltage that may be set.</param>
/// <param name="SupplyCurrent">Highest current limit that the supply may be given.</param>
/// <param name="Pulse">Longest single pulse that may be fired.</param>
/// <param name="GateOn">Highest on level of the gate.</param>
/// <param name="GateOff">Lowest off level of the gate.</param>
public sealed record PermitBounds(
    string OperatingPoint,
    Volts Voltage,
    Amperes SupplyCurrent,
    Seconds Pulse,
    Volts GateOn,
    Volts GateOff);
