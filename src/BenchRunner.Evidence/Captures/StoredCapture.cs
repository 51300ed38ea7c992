using BenchRunner.Acceptance.Validity;

namespace BenchRunner.Evidence.Captures;

/// <summary>A capture as the evidence holds it, without its traces.</summary>
/// <param name="Id">What <see cref="EvidenceReader.ReadTraces"/> names it by; holds within this file alone.</param>
/// <param name="OperatingPoint">Name of the operating point, or <c>zero</c>, <c>proving-before</c>,
/// <c>proving-after</c>.</param>
/// <param name="Number">Number of the capture at its operating point.</param>
/// <param name="TakenAt">When the train was fired, UTC.</param>
/// <param name="BusVoltage">The voltmeter's reading, V; null: not read.</param>
/// <param name="Temperature">Temperature of the plate, degC; null: not known.</param>
/// <param name="Train">The pulse train that was set; null: none was fired.</param>
/// <param name="Valid">What the newest verdict says; null: there is none.</param>
public sealed record StoredCapture(
    long Id,
    string OperatingPoint,
    int Number,
    DateTimeOffset TakenAt,
    double? BusVoltage,
    double? Temperature,
    TrainSet? Train,
    bool? Valid)
{
    /// <summary>The scope's acquisition count before the train; null: not known.</summary>
    public long? CountBefore { get; init; }

    /// <summary>The scope's acquisition count that belongs to the traces; null: not known.</summary>
    public long? CountAfter { get; init; }
}
