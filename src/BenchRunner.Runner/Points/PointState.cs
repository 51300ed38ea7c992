using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Devices;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Points;

/// <summary>What one operating point's loop carries from capture to capture.</summary>
internal sealed class PointState(PlannedPoint planned, PointTaken taken)
{
    public PlannedPoint Planned { get; } = planned;

    public TrainSet Set { get; private set; } = new(
        planned.FirstPulse, planned.Point.Gap, planned.Point.SecondPulse, planned.Point.GateOn, planned.Point.GateOff);

    public List<PlannedRange> Ranges { get; } = [.. planned.Ranges];

    public PointTaken Taken { get; } = taken;

    public int LostInARow { get; set; }

    public int StaleInARow { get; private set; }

    /// <summary>Captures in a row that began with a current.</summary>
    public int BaselineInARow { get; set; }

    /// <summary>Whether the plate was away from its temperature in the last capture.</summary>
    public bool PlateIsOff { get; private set; }

    public long? Count { get; set; }

    public IReadOnlyList<RawTrace> Previous { get; private set; } = [];

    /// <summary>Whether the pulser must be given the train again before the next one.</summary>
    public bool TrainChanged { get; set; }

    /// <summary>Everything that the judgement of a capture rests on.</summary>
    /// <param name="work">The device's work: files, zero capture, width that the proving train showed.</param>
    /// <param name="record">What the scope recorded.</param>
    /// <param name="analysis">What the analysis found in it.</param>
    /// <param name="voltmeter">Reading of the bank before the train, V.</param>
    /// <param name="plate">Measured temperature of the plate, degC; null: not measured.</param>
    public CaptureContext Context(
        DeviceWork work, ScopeRecord record, AnalysisResult analysis, double? voltmeter, double? plate) => new()
        {
            Planned = Planned,
            Sequence = work.Plan.Sequence,
            Bench = work.Plan.Bench,
            Set = Set,
            Traces = record.Traces,
            Previous = Previous,
            CountBefore = Count,
            CountAfter = record.Count,
            StaleBefore = StaleInARow,
            Analysis = analysis,
            Voltmeter = voltmeter,
            Zero = work.Zero,
            Plate = plate,
            ShownLonger = work.ShownLonger,
        };

    /// <summary>Takes over what a capture asks of the next.</summary>
    public void Follow(ScopeRecord record, Verdict verdict)
    {
        bool Found(string criterion) => verdict.Findings.Any(finding => finding.Criterion == criterion);
        StaleInARow = Found(Criteria.Fresh) ? StaleInARow + 1 : 0;
        BaselineInARow = Found(Criteria.Baseline) ? BaselineInARow + 1 : 0;
        PlateIsOff = Found(Criteria.TemperatureWithin);
        Previous = record.Traces;
        Count = record.Count ?? Count;
        if (verdict.CorrectedFirstPulse is { } width)
        {
            Set = Set with { First = width };
            TrainChanged = true;
        }

        for (int i = 0; i < Ranges.Count; i++)
        {
            if (verdict.NextRange.TryGetValue(Ranges[i].Channel, out bool wider))
            {
                Ranges[i] = Ranges[i].Next(wider);
            }
        }
    }
}
