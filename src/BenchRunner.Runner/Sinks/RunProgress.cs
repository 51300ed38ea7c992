using BenchRunner.Instruments.Roles;

namespace BenchRunner.Runner.Sinks;

/// <summary>Where a run stands, for a live line.</summary>
/// <param name="Device">Serial.</param>
/// <param name="OperatingPoint">Name of the operating point.</param>
/// <param name="Capture">Number of the capture under way at this point, from 1.</param>
/// <param name="AtMost">Most captures taken at this point.</param>
/// <param name="Valid">Valid captures so far.</param>
/// <param name="Wanted">Valid captures wanted.</param>
/// <param name="BusVoltage">The voltmeter's last reading, V; NaN before the first.</param>
/// <param name="Interlock">What the interlock controller said last; null before the first poll.</param>
/// <param name="Left">Time left by the plan.</param>
public sealed record RunProgress(
    string Device,
    string OperatingPoint,
    int Capture,
    int AtMost,
    int Valid,
    int Wanted,
    double BusVoltage,
    InterlockState? Interlock,
    TimeSpan Left);
