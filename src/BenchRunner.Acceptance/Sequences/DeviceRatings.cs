namespace BenchRunner.Acceptance.Sequences;

/// <summary>What the device may bear.</summary>
/// <param name="BlockingVoltage">Blocking voltage, V.</param>
/// <param name="PeakCurrent">Peak current, A.</param>
/// <param name="GateLow">Lowest gate voltage, V.</param>
/// <param name="GateHigh">Highest gate voltage, V.</param>
/// <param name="JunctionMaximum">Highest junction temperature, degC.</param>
public sealed record DeviceRatings(
    double BlockingVoltage, double PeakCurrent, double GateLow, double GateHigh, double JunctionMaximum);
