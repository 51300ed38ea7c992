namespace BenchRunner.Acceptance.Validity;

/// <summary>What a hold has measured: both gates off, the bus at its voltage. All values SI.</summary>
/// <param name="BusVoltage">Bus voltage of the operating point, V.</param>
/// <param name="SupplyCurrent">What the supply said that it gives, A.</param>
/// <param name="First">The voltmeter's reading after output and bleeder were off, V.</param>
/// <param name="Last">Its last reading, V.</param>
/// <param name="Seconds">Time between the two, s.</param>
public sealed record LeakageReading(
    double BusVoltage, double SupplyCurrent, double First, double Last, double Seconds);
