using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>What a supply says of itself. Its measured voltage is no proof of anything: the voltmeter is.</summary>
/// <param name="OutputOn">Whether the output is on.</param>
/// <param name="Set">Set-point of the voltage.</param>
/// <param name="Limit">Set-point of the current.</param>
/// <param name="Protection">Level of the over-voltage protection.</param>
/// <param name="ProtectionTripped">Whether the over-voltage protection has tripped.</param>
/// <param name="InCurrentLimit">Whether the output is in current limit.</param>
/// <param name="Measured">Its own reading of the output voltage.</param>
/// <param name="MeasuredCurrent">Its own reading of the output current.</param>
public sealed record SupplyState(
    bool OutputOn,
    Volts Set,
    Amperes Limit,
    Volts Protection,
    bool ProtectionTripped,
    bool InCurrentLimit,
    Volts Measured,
    Amperes MeasuredCurrent);
