using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Switching;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Standards;

/// <summary>State levels, reference levels, transition durations and overshoot as IEEE 181-2011 defines them.</summary>
/// <remarks>
/// The standard's clause numbers and the sense of its definitions are from memory: 5.2 state levels by histogram, 5.3.2
/// reference levels, 5.3.3 their instants, 5.3.4 transition duration, 5.3.5 overshoot and undershoot. The durations of
/// the three shapes are closed forms: 80 % of a straight edge, τ ln 9 of an exponential one, 2·Φ⁻¹(0.9) σ = 2.563103 σ
/// of a Gaussian one (Φ⁻¹(0.9) = 1.281552, the normal distribution's 90 % quantile in any table).
/// </remarks>
public sealed class TransitionTests
{
    private const double Gaussian = 2 * 1.2815515655446004;
    private const double Interval = 0.1e-9;
    private const double Low = 2;
    private const double High = 400;
    private const int Count = 8001;
    private const int Middle = 3000;

    private static readonly Gen<double> _durations = Gen.Double[10e-9, 60e-9];

    [Fact]
    public void A_straight_edge_lasts_80_percent_of_its_length_from_10_to_90_percent() => _durations.Sample(
        length => Lasts(0.8 * length, t => Math.Clamp(t / length, 0, 1)), iter: 20);

    [Fact]
    public void An_exponential_edge_lasts_tau_ln_9() => _durations.Sample(
        tau => Lasts(tau * Math.Log(9), t => t < 0 ? 0 : 1 - Math.Exp(-t / tau)), iter: 20);

    [Fact]
    public void A_gaussian_edge_lasts_2_563_sigma() => _durations.Sample(
        sigma => Lasts(Gaussian * sigma, t => Normal(t / sigma)), iter: 20);

    [Fact]
    public void Both_directions_and_any_pair_of_levels_last_alike()
    {
        // 5.3.2: reference levels are percents of the amplitude above the low state, whichever way the transition goes.
        Gen.Select(Gen.Double[-200, 200], Gen.Double[1, 800], _durations).Sample(
            (low, amplitude, length) =>
            {
                double[] up = Step(low, low + amplitude, t => Math.Clamp(t / length, 0, 1));
                double[] down = [.. up.Reverse()];
                TwoLevels levels = new(low, low + amplitude);
                Near(0.8 * length, Duration(up, levels, CrossingDirection.Rising), 1e-9);
                Near(0.8 * length, Duration(down, levels, CrossingDirection.Falling), 1e-9);
            },
            iter: 20);
    }

    [Fact]
    public void State_levels_are_the_modes_of_the_histogram_and_overshoot_is_outside_them()
    {
        // 5.2: split the histogram at its middle; each half's mode is a state's level. 5.3.5: overshoot is what goes
        // beyond the state, here 25 % of the amplitude, and it moves neither level.
        double[] step = Step(Low, High, t => t < 0 ? 0 : 1 + (0.25 * Math.Exp(-t / 30e-9) * Math.Sin(t / 4e-9)));
        TwoLevels levels = HistogramLevels.Find(step, 0, 0)!.Value;
        double bin = (step.Max() - step.Min()) / HistogramLevels.Bins;
        Assert.Equal(Low, levels.Low, bin);
        Assert.Equal(High, levels.High, bin);

        // The first extremum of e^(−t/τ) sin(t/w): tan(t/w) = τ/w.
        double first = 4e-9 * Math.Atan2(30, 4);
        double peak = High + ((High - Low) * 0.25 * Math.Exp(-first / 30e-9) * Math.Sin(first / 4e-9));
        Reading overshoot = TurnOffPeak.Overshoot(
            TurnOffPeak.Raw(step, Middle, Count - 1), Reading.Stated(High));
        Assert.Equal(peak - High, overshoot.Value, 1e-3);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(2)]
    [InlineData(6)]
    public void State_levels_are_found_under_noise(double sigma)
    {
        Random random = new(11);
        double[] step = [.. Step(Low, High, t => Math.Clamp(t / 20e-9, 0, 1)).Select(x => x + (sigma * Draw(random)))];
        TwoLevels levels = HistogramLevels.Find(step, sigma, 0)!.Value;

        // The mean of thousands of samples: within one bin or five standard errors, whichever is more.
        double allowed = Math.Max((step.Max() - step.Min()) / HistogramLevels.Bins, 5 * sigma / Math.Sqrt(3000));
        Assert.Equal(Low, levels.Low, allowed);
        Assert.Equal(High, levels.High, allowed);
    }

    [Fact]
    public void Reference_instants_lie_on_the_line_between_the_samples_that_straddle_the_level()
    {
        // 5.3.3: linear interpolation between the sample before and the sample after the crossing.
        double[] samples = [0, 0, 0, 40, 100, 100, 100];
        Assert.Equal(2.25, Crossing.First(samples, 10, 0, CrossingDirection.Rising, 0, 6)!.Value, 12);
        Assert.Equal(3 + (1 / 6.0), Crossing.First(samples, 50, 0, CrossingDirection.Rising, 0, 6)!.Value, 12);
        Assert.Equal(3 + (5 / 6.0), Crossing.First(samples, 90, 0, CrossingDirection.Rising, 0, 6)!.Value, 12);
    }

    [Fact]
    public void The_waveform_epoch_of_the_levels_ends_in_the_middles_of_the_states()
    {
        // Waveform epoch, in the standard's words: the span over which levels are formed is stated; here the middle of
        // the state before off1 to the middle of the state after it, and it is reported with the value.
        Waveform train = new SmoothTrain(20e-9, 20e-9, 20e-9, 20e-9, 0.5).Sample(1e-9, 0);
        AnalysisResult result = WaveformAnalysis.Analyse(train, new AnalysisSettings());
        TrainFacts facts = result.Train;
        QuantityValue on = result.Quantities.Single(q => q.Quantity == "vgs_on");
        Assert.Equal((facts.On1!.Value.At + facts.Off1!.Value.At) / 2, on.From!.Value, 1e-9);
        Assert.Equal((facts.Off1.Value.At + facts.On2!.Value.At) / 2, on.To!.Value, 1e-9);
    }

    private static void Lasts(double expected, Func<double, double> shape)
    {
        double[] step = Step(Low, High, shape);

        // Straight lines between samples: a curved edge is off by its curvature times dt²/8, under 1e-4 here.
        Near(expected, Duration(step, new TwoLevels(Low, High), CrossingDirection.Rising), 1e-4);
        SwitchingEvent turnOff = new()
        {
            Vds = step,
            Id = new double[Count],
            SampleInterval = Interval,
            TurnsOn = false,
            Departure = 0,
            End = Count - 1,
            Bus = Reading.Stated(High),
            OnState = Reading.Stated(Low),
            Current = Reading.None("not needed"),
        };
        Near(expected, SwitchingTime.VoltageTransition(turnOff).Value, 1e-4);
    }

    private static double Duration(double[] samples, TwoLevels levels, CrossingDirection direction)
    {
        double start = levels.At(direction == CrossingDirection.Rising ? 0.1 : 0.9);
        double end = levels.At(direction == CrossingDirection.Rising ? 0.9 : 0.1);
        double from = Crossing.First(samples, start, 0, direction, 0, samples.Length - 1)!.Value;
        return (Crossing.First(samples, end, 0, direction, from, samples.Length - 1)!.Value - from) * Interval;
    }

    private static double[] Step(double low, double high, Func<double, double> shape) =>
        [.. Enumerable.Range(0, Count).Select(i => low + ((high - low) * shape((i - Middle) * Interval)))];

    private static void Near(double expected, double actual, double relative) =>
        Assert.InRange(actual / expected, 1 - relative, 1 + relative);

    /// <summary>The normal distribution by Simpson's rule over its density, good to 1e-10.</summary>
    private static double Normal(double x)
    {
        const int parts = 400;
        double width = Math.Clamp(x, -8, 8) / parts;
        double sum = 0;
        for (int i = 0; i < parts; i++)
        {
            sum += Density(i * width) + (4 * Density((i + 0.5) * width)) + Density((i + 1) * width);
        }

        return 0.5 + (sum * width / 6);
    }

    private static double Density(double x) => Math.Exp(-x * x / 2) / Math.Sqrt(2 * Math.PI);

    private static double Draw(Random random) =>
        Math.Sqrt(-2 * Math.Log(1 - random.NextDouble())) * Math.Cos(2 * Math.PI * random.NextDouble());
}
