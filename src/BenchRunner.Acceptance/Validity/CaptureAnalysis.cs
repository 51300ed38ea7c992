using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>The analysis of a capture as the scope gave it, whole or not.</summary>
public static class CaptureAnalysis
{
    /// <summary>Analyses the traces of one capture.</summary>
    /// <param name="traces">The traces as recorded.</param>
    /// <param name="settings">What the analysis takes as given.</param>
    /// <returns>
    /// What the analysis says; nothing at all where the traces do not fit together (none, one twice, different lengths
    /// or time bases), which <c>complete</c> then finds.
    /// </returns>
    public static AnalysisResult Of(IReadOnlyList<RawTrace> traces, AnalysisSettings settings)
    {
        ArgumentNullException.ThrowIfNull(traces);
        ArgumentNullException.ThrowIfNull(settings);
        return FitTogether(traces)
            ? WaveformAnalysis.Analyse(traces, settings)
            : new AnalysisResult(new TrainFacts(), []);
    }

    private static bool FitTogether(IReadOnlyList<RawTrace> traces) =>
        traces.Count > 0
        && traces.Select(trace => trace.Channel).Distinct().Count() == traces.Count
        && traces[0].Codes.Length > 0
        && traces.All(trace => trace.Codes.Length == traces[0].Codes.Length
            && trace.SampleInterval == traces[0].SampleInterval
            && trace.TimeOrigin == traces[0].TimeOrigin);
}
