namespace BenchRunner.Evidence.Holds;

/// <summary>A hold of the bus with both gates off, and the leakage current that it showed.</summary>
/// <param name="OperatingPoint">Name of the operating point before which it was held.</param>
/// <param name="At">When the hold began, UTC.</param>
/// <param name="BusVoltage">Bus voltage that was set, V.</param>
/// <param name="SupplyCurrent">What the supply said it gives, A; null: not read.</param>
/// <param name="FirstVoltage">The voltmeter's reading at the begin, V.</param>
/// <param name="LastVoltage">The voltmeter's reading at the end, V.</param>
/// <param name="Seconds">Time between the two readings, s.</param>
/// <param name="Leakage">Leakage current of the device, A: C · ΔV / Δt less the empty socket's.</param>
/// <param name="Bound">What the sequence allows, A; null: it states none.</param>
/// <param name="Conforms">Whether the device holds the voltage.</param>
public sealed record HoldRow(
    string OperatingPoint,
    DateTimeOffset At,
    double BusVoltage,
    double? SupplyCurrent,
    double FirstVoltage,
    double LastVoltage,
    double Seconds,
    double Leakage,
    double? Bound,
    bool Conforms);
