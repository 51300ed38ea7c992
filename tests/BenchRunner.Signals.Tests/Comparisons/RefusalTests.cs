using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Comparisons;

/// <summary>A NaN or infinity would pass every comparison unseen: each kernel refuses it, in either waveform.</summary>
public sealed class RefusalTests
{
    private static readonly (string Kernel, Action<double[], double[]> Call)[] _kernels =
    [
        ("Sprague and Geers", (one, other) => SpragueGeers.Form(one, other)),
        ("feature-selective", (one, other) => FeatureSelective.Form(one, other)),
        ("channel", (one, other) => ChannelComparison.Form(Channel.Vbus, one, other, null)),
        ("alignment", (one, other) => Alignment.Find(one, other, 0, 1, 0, 20)),
        ("guess", (one, other) => Alignment.Guess(one, other, 0, 1)),
    ];

    [Fact]
    public void A_sample_that_is_not_finite_is_refused_wherever_it_lies()
    {
        foreach ((string kernel, Action<double[], double[]> call) in _kernels)
        {
            call(Wave(), Wave());
            foreach (double bad in (double[])[double.NaN, double.PositiveInfinity, double.NegativeInfinity])
            {
                foreach (int at in (int[])[0, 1, 50, 99])
                {
                    double[] broken = Wave();
                    broken[at] = bad;
                    Assert.True(Record.Exception(() => call(broken, Wave())) is ArgumentException, kernel);
                    Assert.True(Record.Exception(() => call(Wave(), broken)) is ArgumentException, kernel);
                }
            }
        }
    }

    private static double[] Wave() => [.. Enumerable.Range(0, 100).Select(i => Math.Sin(i * 0.3) + (0.01 * i))];
}
