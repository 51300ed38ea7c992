using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Captures;

/// <summary>A capture as it goes into the evidence, before anything is computed from it.</summary>
/// <param name="OperatingPoint">Name of the operating point, or <c>zero</c>, <c>proving-before</c>,
/// <c>proving-after</c>.</param>
/// <param name="Number">Number of the capture at its operating point, from 1.</param>
/// <param name="TakenAt">When the train was fired, UTC.</param>
/// <param name="Traces">One trace a channel; at least one, each channel once.</param>
/// <param name="BusVoltage">The voltmeter's reading before the train, V; null: not read.</param>
/// <param name="Temperature">Temperature of the device's plate, degC; null: not known.</param>
/// <param name="Train">The pulse train that was set; null: none was fired.</param>
public sealed record CaptureRow(
    string OperatingPoint,
    int Number,
    DateTimeOffset TakenAt,
    IReadOnlyList<RawTrace> Traces,
    double? BusVoltage,
    double? Temperature,
    TrainSet? Train)
{
    /// <summary>The scope's acquisition count before the train; null: not known.</summary>
    public long? CountBefore { get; init; }

    /// <summary>The scope's acquisition count that belongs to the traces; null: not known.</summary>
    public long? CountAfter { get; init; }
}
