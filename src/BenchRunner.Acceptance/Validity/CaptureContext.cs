using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Everything that the judgement of one capture rests on. All values SI.</summary>
public sealed record CaptureContext
{
    /// <summary>The point as planned.</summary>
    public required PlannedPoint Planned { get; init; }

    /// <summary>The sequence: bounds, kind, position, expectations.</summary>
    public required Sequence Sequence { get; init; }

    /// <summary>The bench.</summary>
    public required Bench Bench { get; init; }

    /// <summary>The train as set, corrected width included.</summary>
    public required TrainSet Set { get; init; }

    /// <summary>The traces as recorded.</summary>
    public required IReadOnlyList<RawTrace> Traces { get; init; }

    /// <summary>The traces of the capture before; empty for the first.</summary>
    public IReadOnlyList<RawTrace> Previous { get; init; } = [];

    /// <summary>The scope's acquisition count before firing; null: not known.</summary>
    public long? CountBefore { get; init; }

    /// <summary>
    /// The scope's acquisition count that belongs to the traces; null: not known, or it changed while reading.
    /// </summary>
    public long? CountAfter { get; init; }

    /// <summary>How many captures in a row, just before this one, were not fresh.</summary>
    public int StaleBefore { get; init; }

    /// <summary>What the analysis found in the traces.</summary>
    public required AnalysisResult Analysis { get; init; }

    /// <summary>The voltmeter's reading of the bank just before the train, V; null: none.</summary>
    public double? Voltmeter { get; init; }

    /// <summary>What the zero capture of the run says; null: none was taken.</summary>
    public ZeroReading? Zero { get; init; }

    /// <summary>Measured temperature of the plate, degC; null: not measured.</summary>
    public double? Plate { get; init; }

    /// <summary>How much longer than set the proving train's pulses were, s; 0: nothing shown yet.</summary>
    public double ShownLonger { get; init; }
}
