using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;

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
            ZeroCurrent = 0,
        };
    }

    public static Verdict Of(SyntheticTrain train) => CaptureValidity.Judge(Context(train));
}
