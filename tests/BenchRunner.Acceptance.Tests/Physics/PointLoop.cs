using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Physics;

/// <summary>
/// Takes captures at a point until enough of them are valid, by the verdicts alone: the loop of a run, without wires.
/// </summary>
internal static class PointLoop
{
    /// <summary>The first capture of a point, judged.</summary>
    public static Verdict First(FiredBench bench, PlannedPoint planned) =>
        CaptureValidity.Judge(Context(bench, planned, Start(planned), planned.Ranges, [], 1));

    /// <summary>All captures of a point.</summary>
    public static List<TakenCapture> Take(FiredBench bench, PlannedPoint planned, List<AnalysisResult> kept)
    {
        var taken = new List<TakenCapture>();
        TrainSet set = Start(planned);
        PlannedRange[] ranges = [.. planned.Ranges];
        IReadOnlyList<RawTrace> previous = [];
        while (taken.Count < bench.Sequence.CapturesAtMost
            && taken.Count(one => one.IsKept) < bench.Sequence.ValidCaptures)
        {
            CaptureContext context = Context(bench, planned, set, ranges, previous, taken.Count + 1);
            Verdict verdict = CaptureValidity.Judge(context);
            taken.Add(new TakenCapture(
                taken.Count + 1, verdict.IsValid, set.First,
                string.Join(", ", verdict.Findings.Select(finding => finding.Criterion))));
            if (verdict.Stop is not null)
            {
                break;
            }

            if (verdict.IsValid)
            {
                kept.Add(context.Analysis);
            }

            set = set with { First = verdict.CorrectedFirstPulse ?? set.First };
            ranges =
            [
                .. ranges.Select(range =>
                    verdict.NextRange.TryGetValue(range.Channel, out bool wider) ? range.Next(wider) : range),
            ];
            previous = context.Traces;
        }

        return taken;
    }

    /// <summary>Everything that one capture's judgement rests on.</summary>
    public static CaptureContext Context(
        FiredBench bench,
        PlannedPoint planned,
        TrainSet set,
        IReadOnlyList<PlannedRange> ranges,
        IReadOnlyList<RawTrace> previous,
        long fire)
    {
        IReadOnlyList<RawTrace> traces = bench.Fire(planned, set, ranges, fire);
        return new CaptureContext
        {
            Planned = planned,
            Sequence = bench.Sequence,
            Bench = bench.Bench,
            Set = set,
            Traces = traces,
            Previous = previous,
            CountBefore = fire,
            CountAfter = fire + 1,
            Analysis = CaptureAnalysis.Of(traces, Planner.AnalysisSettingsOf(bench.Bench, bench.Sequence)),
            Voltmeter = bench.Bank(planned, fire),
        };
    }

    /// <summary>The zero capture of a bench without current before its trains: what its probes show before
    /// on1.</summary>
    public static ZeroReading Zero(CaptureContext sound)
    {
        int before = (int)(0.8 * sound.Planned.Pretrigger / sound.Planned.SampleInterval);
        RawTrace[] traces = [.. sound.Traces.Select(trace => trace with { Codes = trace.Codes[..before] })];
        return ZeroReading.Of(traces, sound.Bench, sound.Sequence, sound.Voltmeter ?? 0);
    }

    /// <summary>The train as planned.</summary>
    public static TrainSet Start(PlannedPoint planned) => new(
        planned.FirstPulse, planned.Point.Gap, planned.Point.SecondPulse, planned.Point.GateOn, planned.Point.GateOff);
}
