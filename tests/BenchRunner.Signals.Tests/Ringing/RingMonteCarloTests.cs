using BenchRunner.Signals.Ringing;

namespace BenchRunner.Signals.Tests.Ringing;

/// <summary>Drawn records against the Cramér-Rao bound: 0.3 to 5 % noise, white and coloured.</summary>
/// <remarks>The seeds are fixed: a failure comes back. The bound's source: <see cref="RingBound"/>.</remarks>
public sealed class RingMonteCarloTests
{
    private const double Dt = 1e-9;

    /// <summary>Correlation from sample to sample behind a single pole at 200 MHz.</summary>
    private static readonly double Probe = Math.Exp(-2 * Math.PI * 200e6 * Dt);

    public static TheoryData<double> Noise => [0.003, 0.01, 0.02, 0.05];

    /// <summary>Behind the probe's pole; as several poles in a row make it; as overshooting electronics do.</summary>
    public static TheoryData<double> Correlations => [Probe, 0.7, 0.9, -0.4];

    public static TheoryData<double> QuickCorrelations => [Probe, -0.4];

    [Theory]
    [MemberData(nameof(Noise))]
    public void Spread_reaches_the_bound_without_bias_or_misses(double noise)
    {
        RingTrials trials = new();
        foreach (RingRecord record in Records(noise, [500]))
        {
            trials.Draw(record, 100);
        }

        HoldsBound(trials, 0);
    }

    [Theory]
    [MemberData(nameof(QuickCorrelations))]
    public void Stated_uncertainties_hold_in_coloured_noise(double correlation)
    {
        RingTrials trials = new();
        foreach (RingRecord record in Records(0.02, [500]))
        {
            trials.Draw(record, 60, correlation);
        }

        Assert.InRange(trials.Wrong, 0, 3);
        Assert.InRange(trials.Frequency.Own, 0.9, 1.1);
        Assert.InRange(trials.Damping.Own, 0.9, 1.1);
    }

    /// <summary>A bias of a tenth of the spread shows in this many draws alone; the quick test pools the cases.</summary>
    [Fact]
    [Trait("kind", "slow")]
    public void Each_frequency_and_damping_reaches_the_bound()
    {
        const double Part = 0.01;
        foreach (RingRecord record in Records(Part, [500]))
        {
            HoldsBound(new RingTrials().Draw(record, 1500), 2);
        }

        RingRecord two = new(400, 0, Dt, 500, [(35e6, 0.03, 100, 0.3), (80e6, 0.04, 40, 1)], 100 * Part, Seed: 6);
        HoldsBound(new RingTrials().Draw(two, 1500), 2);
    }

    [Theory]
    [MemberData(nameof(Correlations))]
    [Trait("kind", "slow")]
    public void Stated_uncertainties_hold_in_strong_coloured_noise_of_short_and_long_records(double correlation)
    {
        foreach ((int length, int draws) in new[] { (500, 120), (2000, 40) })
        {
            RingTrials trials = new();
            foreach (RingRecord record in Records(0.05, [length]))
            {
                trials.Draw(record, draws, correlation);
            }

            // Slow noise of a long record can look like a mode of its own: about 2 % of the orders at 0.9.
            Assert.InRange(trials.Wrong, 0, 6 * draws * 3 / 100);
            Assert.InRange(trials.Frequency.Own, 0.9, 1.1);
            Assert.InRange(trials.Damping.Own, 0.9, 1.1);
        }
    }

    [Theory]
    [InlineData(5, 10)]
    [InlineData(12, 10)]
    [InlineData(30, 10)]
    [InlineData(12, 20)]
    public void Two_equal_modes_15_percent_apart_are_told_apart(int samplesAPeriod, int periods) =>
        Assert.InRange(ToldApart(samplesAPeriod, periods, 100), 0.95, 1);

    [Theory]
    [InlineData(5)]
    [InlineData(8)]
    [InlineData(12)]
    [InlineData(20)]
    [InlineData(30)]
    [InlineData(50)]
    [Trait("kind", "slow")]
    public void Two_equal_modes_are_told_apart_over_ten_periods_and_more(int samplesAPeriod) =>
        Assert.All([10, 12, 15, 20], periods => Assert.InRange(ToldApart(samplesAPeriod, periods, 100), 0.95, 1));

    private static IEnumerable<RingRecord> Records(double noise, int[] lengths) =>
        from count in lengths
        from f in new[] { 35e6, 70e6 }
        from damping in new[] { 0.02, 0.04, 0.06 }
        select new RingRecord(400, 0, Dt, count, [(f, damping, 100, 60 * damping)], 100 * noise, (ulong)f);

    private static void HoldsBound(RingTrials trials, int wrong)
    {
        Assert.InRange(trials.Wrong, 0, wrong);
        foreach (RingTrials.Summary errors in new[] { trials.Frequency, trials.Damping })
        {
            Assert.InRange(errors.Spread, 0.9, 1.1);
            Assert.InRange(errors.Bias, -0.1, 0.1);
            Assert.InRange(errors.Own, 0.9, 1.1);
        }
    }

    /// <summary>Share of trials at 1 % noise in which both frequencies are right: within 1 % or three of their own
    /// standard uncertainties.</summary>
    private static double ToldApart(int samplesAPeriod, int periods, int trials)
    {
        int right = 0;
        double f = 1 / (samplesAPeriod * Dt);
        for (ulong seed = 0; seed < (ulong)trials; seed++)
        {
            (double, double, double, double)[] modes = [(f, 0.03, 100, 0.9 * seed), (1.15 * f, 0.03, 100, 2.3 * seed)];
            RingRecord record = new(400, 0, Dt, periods * samplesAPeriod, modes, Sigma: 1, seed);
            RingFitResult ring = RingFit.Fit(record.Samples(), Dt, RingFit.MostModes);
            right += ring.Order == 2 && IsRight(ring, f) && IsRight(ring, 1.15 * f) ? 1 : 0;
        }

        return (double)right / trials;
    }

    private static bool IsRight(RingFitResult ring, double f)
    {
        RingMode mode = ring.Modes.MinBy(mode => Math.Abs(mode.Frequency - f));
        return Math.Abs(mode.Frequency - f) <= Math.Max(0.01 * f, 3 * mode.FrequencyUncertainty);
    }
}
