using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Uncertainty;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Tests.Rescoring;

/// <summary>A run computed again from the evidence alone: stored files, stored traces, what was read beside
/// them.</summary>
/// <remarks>Nothing of the runner is used: only the reader of the evidence and pure functions.</remarks>
internal sealed class Recomputed
{
    private readonly List<(StoredCapture Capture, Verdict Verdict, AnalysisResult Result)> _captures = [];

    private Recomputed(DeviceDecision decision, ZeroReading zero) => (Decision, Zero) = (decision, zero);

    /// <summary>Every capture with a train, in the order taken.</summary>
    public IReadOnlyList<(StoredCapture Capture, Verdict Verdict, AnalysisResult Result)> Captures => _captures;

    /// <summary>What the values say of the device.</summary>
    public DeviceDecision Decision { get; private set; }

    /// <summary>The zero at the run's end.</summary>
    public ZeroReading Zero { get; private set; }

    /// <summary>Computes a run again.</summary>
    /// <param name="evidence">The file.</param>
    /// <param name="run">Identity of the run.</param>
    /// <param name="withZero">Whether the offsets that the zero capture found are taken.</param>
    public static Recomputed Of(EvidenceReader evidence, string run, bool withZero = true)
    {
        IReadOnlyList<SourceFile> files = evidence.Files(run);
        Sequence sequence = Value(SequenceFile.Read(files.Single(file => file.Role == "sequence")));
        Bench bench = Value(BenchFile.Read(files.Single(file => file.Role == "bench")));
        Plan plan = Planner.Plan(sequence, bench).Plan!;
        AnalysisSettings stated = Planner.AnalysisSettingsOf(bench, sequence);
        bool hasPlate = bench.Roles.ContainsKey("hotplate");

        ZeroReading? zero = null;
        double shownLonger = 0;
        (string Name, IReadOnlyList<RawTrace> Traces, int Stale) before = ("", [], 0);
        var captures = new List<(StoredCapture Capture, Verdict Verdict, AnalysisResult Result)>();
        var budgets = new Dictionary<string, BenchBudget>();
        foreach (StoredCapture capture in evidence.Captures(run))
        {
            IReadOnlyList<RawTrace> traces = evidence.ReadTraces(capture.Id);
            string name = capture.OperatingPoint;
            if (name == UncountedPoints.Zero)
            {
                ZeroReading later = ZeroReading.Of(traces, bench, sequence, capture.BusVoltage!.Value);
                zero = zero?.WithCurrentsOf(later) ?? later;
                continue;
            }

            bool proves = UncountedPoints.Has(name);
            PlannedPoint planned = proves
                ? plan.Proving with { Point = plan.Proving.Point with { Name = name } }
                : plan.Points.Single(point => point.Point.Name == name);
            AnalysisSettings settings = withZero ? zero!.ApplyTo(stated) : stated;
            before = before.Name == name ? before : (name, [], 0);
            var context = new CaptureContext
            {
                Planned = planned,
                Sequence = sequence,
                Bench = bench,
                Set = capture.Train!,
                Traces = traces,
                Previous = before.Traces,
                CountBefore = capture.CountBefore,
                CountAfter = capture.CountAfter,
                StaleBefore = before.Stale,
                Analysis = CaptureAnalysis.Of(traces, settings),
                Voltmeter = capture.BusVoltage,
                Zero = zero,
                Plate = hasPlate && !proves ? capture.Temperature : null,
                ShownLonger = shownLonger,
            };
            Verdict verdict = proves ? ProvingJudge.Judge(context) : CaptureValidity.Judge(context);
            bool stale = verdict.Findings.Any(finding => finding.Criterion == Criteria.Fresh);
            before = (name, traces, stale ? before.Stale + 1 : 0);
            captures.Add((capture, verdict, context.Analysis));
            if (proves && verdict.IsValid)
            {
                shownLonger = ProvingJudge.ShownLonger(context);
            }
            else if (verdict.IsValid && !budgets.ContainsKey(name))
            {
                budgets.Add(name, BenchBudget.Of(traces, bench, settings));
            }
        }

        // A train that left no record stands in the events alone; it has a number that no capture bears.
        DeviceDecision decision = Decider.Decide(sequence, bench,
            [.. captures.Where(one => !UncountedPoints.Has(one.Capture.OperatingPoint))
                .GroupBy(one => one.Capture.OperatingPoint)
                .Select(point => new PointCaptures(
                    point.Key,
                    point.Max(one => one.Capture.Number),
                    [.. point.Where(one => one.Verdict.IsValid).Select(one => one.Result)],
                    budgets.GetValueOrDefault(point.Key)))]);
        var again = new Recomputed(decision, zero!);
        again._captures.AddRange(captures);
        return again;
    }

    private static T Value<T>(Read<T> read)
        where T : class
    {
        Assert.Empty(read.Problems.Select(problem => problem.ToString()));
        return read.Value!;
    }
}
