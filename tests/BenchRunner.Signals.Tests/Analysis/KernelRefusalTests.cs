using System.Reflection;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Energy;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.LoadCurrent;
using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Recovery;
using BenchRunner.Signals.Ringing;
using BenchRunner.Signals.RingWindows;
using BenchRunner.Signals.Switching;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>A kernel refuses a sample that is NaN or infinite, wherever it lies in what the kernel reads; the analysis
/// above turns it into a reason.</summary>
public sealed class KernelRefusalTests
{
    private const int Count = 64;

    /// <summary>A kernel, the samples that it reads of a span of <see cref="Count"/>, and a call.</summary>
    private static readonly (string Kernel, int From, int To, Action<double[]> Call)[] _kernels =
    [
        ("Crossing.First", 0, 40, x => Crossing.First(x, 40.5, 1, CrossingDirection.Rising, 0, 63)),
        ("Crossing.First", 0, 63, x => Crossing.First(x, 99, 1, CrossingDirection.Rising, 0, 63)),
        ("Crossing.First", 10, 20, x => Crossing.First(x, 5, 1, CrossingDirection.Rising, 10, 20)),
        ("Crossing.FirstAtOrBelow", 3, 60, x => Crossing.FirstAtOrBelow(x, -1, 3, 60)),
        ("CrossingScan..ctor", 2, 60, x => _ = new CrossingScan(x, 30, 1, 2, 60)),
        ("GateEdges.Find", 0, 63, x => GateEdges.Find(x, 1e-9, new TwoLevels(0, 63), 1, 1e-9)),
        ("GateEdges.Duration", 7, 57, x => GateEdges.Duration(
            x, new TwoLevels(0, 63), 0.5, new GateEdge(31.5, 7, CrossingDirection.Rising), 63)),
        ("Integral.Of", 3, 60, x => Integral.Of(x, 3.5, 59.5)),
        ("Integral.OfProduct", 3, 60, x => Integral.OfProduct(x, Ones(), 3.5, 59.5)),
        ("Integral.OfProduct", 3, 60, x => Integral.OfProduct(Ones(), x, 3.5, 59.5)),
        ("Integral.Mean", 3, 60, x => Integral.Mean(x, 3.5, 59.5)),
        ("Integral.At", 3, 4, x => Integral.At(x, 3.5)),
        ("Median.Of", 0, 63, x => Median.Of(x)),
        ("Noise.Sigma", 0, 63, x => Noise.Sigma(x, 0.1)),
        ("HistogramLevels.Find", 0, 63, x => HistogramLevels.Find(x, 0.1, 0)),
        ("BusVoltage.Before", 21, 60, x => BusVoltage.Before(x, 5e-9, 60)),
        ("OnState.Form", 45, 50, x => OnState.Form(x, 0, 50, 50)),
        ("FirstRamp.Fit", 18, 57, x => FirstRamp.Fit(x, 1e-9, 0, 60, 60)),
        ("Line.Fit", 4, 59, x => Line.Fit(x, 3.5, 59.5)),
        ("Line.Fit", 4, 59, x => Line.Fit(x, 3.5, 59.5, slope: 1)),
        ("LoadLine.Fit", 20, 57, x => LoadLine.Fit(x, 0, 60, 10, 20, 1, 0, out _)),
        ("Extremes..ctor", 5, 60, x =>
        {
            Extremes maxima = new(x, 0.5, minima: false, 5, 60);
            while (maxima.Next())
            {
            }
        }),
        ("HighSidePeaks.Form", 5, 60, x => HighSidePeaks.Form(x, Reading.Stated(100), 0, 5, 60, 1)),
        ("Peak.Raw", 5, 60, x => Peak.Raw(x, 5, 60)),
        ("Peak.Vertex", 9, 11, x => Peak.Vertex(x, 10)),
        ("Peak.TopFifth", 5, 60, x => Peak.TopFifth(x, 5, 60, 0)),
        ("Peak.Parabola", 0, 63, x => Peak.Parabola(x, out _, out _)),
        ("TurnOffPeak.Raw", 5, 60, x => TurnOffPeak.Raw(x, 5, 60)),
        ("TurnOffPeak.Settled", 40, 60, x => TurnOffPeak.Settled(x, 0, 60)),
        ("TurnOnPeak.Raw", 5, 60, x => TurnOnPeak.Raw(x, 5, 60)),
        ("RecoveryEvent..ctor", 5, 60, x => _ = new RecoveryEvent(x, 1e-9, 5, 60, 0, 0)),
        ("RecoverySlope.Commutation", 9, 9, Commutation),
        ("RecoverySlope.Commutation", 18, 18, Commutation),
        ("RecoveryEnergy.Form", 20, 30, x => RecoveryEnergy.Form(x, Hump(), 1e-9, Reading.Of(1, 20, 30))),
        ("RecoveryEnergy.Form", 20, 30, x => RecoveryEnergy.Form(Hump(), x, 1e-9, Reading.Of(1, 20, 30))),
        ("SkewSensitivity.Form", 3, 60, x => SkewSensitivity.Form(x, Ones(), 1e-9, 3.5, 59.5, false, false)),
        ("SkewSensitivity.Form", 3, 60, x => SkewSensitivity.Form(Ones(), x, 1e-9, 3.5, 59.5, true, true)),
        ("LoopInductance.Form", 13, 51, x => LoopInductance.Form(TurnOn(Ones(), Up()), x, null, 0)),
        ("LoopInductance.Form", 13, 51, x => LoopInductance.Form(TurnOn(x, Up()), Ones(), null, 0)),
        ("LoopInductance.Form", 0, 51, x => LoopInductance.Form(TurnOn(Ones(), x), Ones(), null, 0)),
        ("RingFit.Fit", 0, 63, x => RingFit.Fit(x, 1e-9, 1)),
        ("RingWindow.AboveBus", 5, 60, x => RingWindow.AboveBus(x, 1e-9, 100, 0, 5, 60)),
    ];

    /// <summary>Kernels that say in their docstring what a sample that is not finite does.</summary>
    private static readonly string[] _takeAnything =
    [
        // Passed over: a file's records hold clipped samples when their step is sought.
        "SmallestStep.OfValues",

        // Needs the window of a voltage that rings; its fit is RingFit.Fit's.
        "RingWindow.Along",

        // Holds samples and looks at none.
        "Samples..ctor",
    ];

    public static TheoryData<int> Numbers => [.. Enumerable.Range(0, _kernels.Length)];

    [Theory]
    [MemberData(nameof(Numbers))]
    public void A_kernel_refuses_a_sample_that_is_not_finite(int number)
    {
        (string kernel, int from, int to, Action<double[]> call) = _kernels[number];
        call(Up());
        for (int i = from; i <= to; i++)
        {
            foreach (double bad in (ReadOnlySpan<double>)
                [double.NaN, double.PositiveInfinity, double.NegativeInfinity])
            {
                double[] samples = Up();
                samples[i] = bad;
                Assert.True(
                    Record.Exception(() => call(samples)) is ArgumentException,
                    $"{kernel} takes {bad} at sample {i}");
            }
        }
    }

    [Fact]
    public void Every_public_kernel_of_levels_edges_energy_peaks_and_so_on_is_tried()
    {
        // Comparisons and the matrices of a fit are tried beside their own anchors; Correction takes whole waveforms.
        string[] tried = [.. _kernels.Select(k => k.Kernel).Concat(_takeAnything)];
        string[] kernels = [.. typeof(WaveformAnalysis).Assembly.GetExportedTypes()
            .Where(t => t.Namespace is not ("BenchRunner.Signals.Comparisons" or "BenchRunner.Signals.Fitting"))
            .SelectMany(t => t.GetMembers(BindingFlags.Public | BindingFlags.Static | BindingFlags.Instance))
            .OfType<MethodBase>()
            .Where(m => m.GetParameters().Any(p => IsSamples(p.ParameterType))
                && (!m.IsSpecialName || m.IsConstructor))
            .Select(m => $"{m.DeclaringType!.Name}.{m.Name}")
            .Distinct()];
        Assert.Contains("Integral.Of", kernels);
        Assert.Empty(kernels.Except(tried));
    }

    /// <summary>From −10 at sample 9 to zero at 18: the current is read at these two.</summary>
    private static void Commutation(double[] current) => RecoverySlope.Commutation(
        new RecoveryEvent(Hump(), 1e-9, 2, 60, 0, 0), current, Reading.Stated(20));

    private static bool IsSamples(Type type) =>
        type == typeof(ReadOnlySpan<double>) || type == typeof(Span<double>) || type == typeof(Samples);

    private static double[] Up() => [.. Enumerable.Range(0, Count).Select(i => (double)i)];

    private static double[] Ones() => [.. Enumerable.Repeat(1.0, Count)];

    /// <summary>−20 to 20 from 0 to 36, back to zero, and on at zero.</summary>
    private static double[] Hump() =>
        [.. Enumerable.Range(0, Count).Select(i => i <= 36 ? (i * 40 / 36.0) - 20 : Math.Max(0, 92 - (2.0 * i)))];

    private static SwitchingEvent TurnOn(double[] vds, double[] id) => new()
    {
        Vds = vds,
        Id = id,
        SampleInterval = 1e-9,
        TurnsOn = true,
        Departure = 0,
        End = Count - 1,
        Bus = Reading.Stated(100),
        OnState = Reading.Stated(0),
        Current = Reading.Stated(56),
    };
}
