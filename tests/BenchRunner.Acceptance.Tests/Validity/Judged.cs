using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Validity;

/// <summary>Captures of the shipped point <c>rated</c>, judged.</summary>
internal static class Judged
{
    public static PlannedPoint Planned { get; } = Shipped.Point(Shipped.Rated, Shipped.Bench);

    private static readonly AnalysisSettings _settings = Planner.AnalysisSettingsOf(Shipped.Bench, Shipped.Rated);

    /// <summary>The context of a train: everything else as a healthy bench has it.</summary>
    public static CaptureContext Context(SyntheticTrain? train = null, PlannedPoint? planned = null)
    {
        PlannedPoint point = planned ?? Planned;
        var traces = (train ?? new SyntheticTrain()).Record(point);
        return new CaptureContext
        {
            Planned = point,
            Sequence = Shipped.Rated,
            Bench = Shipped.Bench,
            Set = new TrainSet(new SyntheticTrain().First, point.Point.Gap, point.Point.SecondPulse, 18, -4),
            Traces = traces,
            CountBefore = 7,
            CountAfter = 8,
            Analysis = WaveformAnalysis.Analyse(TraceConversion.ToWaveform(traces), _settings),
            Voltmeter = 600,
            Zero = Zero(traces, 0),
        };
    }

    /// <summary>A zero capture on the ranges of a train: every channel at zero but the switch's current.</summary>
    public static ZeroReading Zero(IReadOnlyList<RawTrace> traces, double current) => ZeroReading.Of(
        [.. traces.Select(trace => Flat(trace, trace.Channel == Channel.IdLow ? current : 0))],
        Shipped.Bench, Shipped.Rated, bank: 0);

    private static RawTrace Flat(RawTrace trace, double value)
    {
        // Between two codes the value itself is met by the share of samples on either side.
        double code = ((value - trace.Origin) / trace.Increment) + trace.Reference;
        short[] codes = new short[1000];
        for (int i = 0; i < codes.Length; i++)
        {
            codes[i] = (short)Math.Floor(code + ((i + 0.5) / codes.Length));
        }

        return trace with { Codes = codes };
    }

    public static Verdict Of(SyntheticTrain train) => CaptureValidity.Judge(Context(train));
}
