using BenchRunner.Acceptance.Decisions;

namespace BenchRunner.Runner.Devices;

/// <summary>How a device's run ended.</summary>
/// <param name="Run">Identity of the run in the evidence.</param>
/// <param name="Device">Serial.</param>
/// <param name="Decision">Outcome, reason and values.</param>
/// <param name="CapturesTaken">Captures taken at the operating points.</param>
/// <param name="CapturesValid">Those that are valid.</param>
/// <param name="Ending">How the bench came out of it.</param>
/// <param name="BusVoltage">The voltmeter's last reading, V; null where there was none.</param>
/// <param name="BusAt">Time of that reading, UTC.</param>
/// <param name="Plate">What the hotplate measured after the safe state, degC; null where there is none or it does not
/// answer.</param>
public sealed record DeviceReport(
    string Run,
    string Device,
    DeviceDecision Decision,
    int CapturesTaken,
    int CapturesValid,
    BenchEnding Ending,
    double? BusVoltage,
    DateTimeOffset? BusAt,
    double? Plate)
{
    /// <summary>Whether the voltmeter proved the bus down.</summary>
    public bool BusProved { get; init; }

    /// <summary>Energy that the bank may hold, J; where the bus is not proved down, by the highest voltage that it may
    /// have.</summary>
    public double BusEnergyAtMost { get; init; }
}
