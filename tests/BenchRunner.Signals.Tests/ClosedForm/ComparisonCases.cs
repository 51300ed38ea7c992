using BenchRunner.Signals.Comparisons;

namespace BenchRunner.Signals.Tests.ClosedForm;

/// <summary>A waveform against a scaled and against a late copy of itself.</summary>
internal static class ComparisonCases
{
    private const int Count = 1024;

    /// <summary>Content in the low and the high part of the spectrum, none in its five slow bins.</summary>
    public static Dictionary<string, double?> Copy(double scale)
    {
        double[] reference = Sample(t => Math.Sin(12 * t) + (0.7 * Math.Cos(31 * t)) + (0.4 * Math.Sin(200 * t)));
        double[] measured = [.. reference.Select(x => scale * x)];
        Dictionary<string, double?> got = Sprague(measured, reference);
        FeatureSelective features = FeatureSelective.Form(measured, reference)!.Value;
        got["compare|fdm mean"] = features.Feature;
        got["compare|adm mean, no DC content"] = features.Amplitude;
        return got;
    }

    public static Dictionary<string, double?> Late(double phase) =>
        Sprague(Sample(t => Math.Sin((3 * t) - phase)), Sample(t => Math.Sin(3 * t)));

    private static Dictionary<string, double?> Sprague(double[] measured, double[] reference)
    {
        SpragueGeers errors = SpragueGeers.Form(measured, reference)!.Value;
        return new()
        {
            ["compare|sprague-geers magnitude"] = errors.Magnitude,
            ["compare|sprague-geers phase"] = errors.Phase,
        };
    }

    private static double[] Sample(Func<double, double> of) =>
        [.. Enumerable.Range(0, Count).Select(i => of(2 * Math.PI * i / Count))];
}
