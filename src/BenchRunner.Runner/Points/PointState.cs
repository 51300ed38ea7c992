using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Instruments.Roles;
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

    public long? Count { get; set; }

    public IReadOnlyList<RawTrace> Previous { get; private set; } = [];

    /// <summary>Whether the pulser must be given the train again before the next one.</summary>
    public bool TrainChanged { get; set; }

    /// <summary>Takes over what a capture asks of the next.</summary>
    public void Follow(ScopeRecord record, Verdict verdict)
    {
        bool stale = verdict.Findings.Any(finding => finding.Criterion == Criteria.Fresh);
        StaleInARow = stale ? StaleInARow + 1 : 0;
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
