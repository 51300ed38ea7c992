using BenchRunner.Signals.Ringing;
using CsCheck;

namespace BenchRunner.Signals.Tests.Ringing;

public sealed class RingFitTests
{
    private const double Dt = 1e-9;

    private static readonly RingRecord Plain =
        new(C: 400, D: 0, Dt, Count: 500, [(35e6, 0.04, 100, 0.3)], Sigma: 1, Seed: 1);

    public static TheoryData<string, double[]> Ringless => new()
    {
        { "constant", Make(500, _ => 3.7) },
        { "zero", Make(500, _ => 0) },
        { "line", Make(500, n => 3.7 + (0.1 * n)) },
        { "parabola", Make(500, n => 0.1 * n * n) },
        { "bare exponential", Make(500, n => 100 * Math.Exp(-n / 60.0)) },
        { "two exponentials", Make(500, n => (100 * Math.Exp(-n / 60.0)) - (30 * Math.Exp(-n / 15.0))) },
        { "growing oscillation", Make(500, n => Math.Exp(n / 300.0) * Math.Cos(0.3 * n)) },
        { "oscillation that dies within a period", Make(500, n => Math.Exp(-n / 30.0) * Math.Cos(n / 25.0)) },
    };

    [Theory]
    [MemberData(nameof(Ringless))]
    public void What_does_not_ring_gives_a_reason_and_no_number(string what, double[] samples)
    {
        RingFitResult ring = RingFit.Fit(samples, Dt, 3);

        Assert.StartsWith("no ringing found", ring.Reason, StringComparison.Ordinal);
        Assert.True(ring.Modes.Count == 0 && ring.Strongest is null, what);
    }

    [Fact]
    public void Pure_noise_hardly_ever_passes_for_a_ring()
    {
        int found = 0;
        for (ulong seed = 0; seed < 300; seed++)
        {
            found += RingFit.Fit(RingRecord.Noise(seed, 400), Dt, 3).Reason is null ? 1 : 0;
        }

        Assert.InRange(found, 0, 3);
    }

    [Fact]
    public void A_noisy_exponential_hardly_ever_passes_for_a_ring()
    {
        int found = 0;
        for (ulong seed = 0; seed < 300; seed++)
        {
            double[] noise = RingRecord.Noise(seed, 400);
            double[] samples = Make(400, n => (100 * Math.Exp(-n / 60.0)) + noise[n]);
            found += RingFit.Fit(samples, Dt, 3).Reason is null ? 1 : 0;
        }

        Assert.InRange(found, 0, 3);
    }

    [Fact]
    public void A_ring_on_the_tail_of_a_recovery_is_found_beside_it()
    {
        double[] ring = (Plain with { C = 0, Modes = [(60e6, 0.03, 20, 0)], Sigma = 0.2 }).Samples();

        RingFitResult found = RingFit.Fit(Make(500, n => ring[n] + (150 * Math.Exp(-n / 80.0))), Dt, 3);

        Assert.Equal(1, found.Order);
        Assert.InRange(found.Modes[0].Frequency, 60e6 * 0.999, 60e6 * 1.001);
        Assert.InRange(found.Modes[0].Amplitude, 19.5, 20.5);
    }

    [Theory]
    [InlineData(5)]
    [InlineData(12)]
    [InlineData(30)]
    public void Two_equal_modes_15_percent_apart_are_told_apart_over_ten_periods(int samplesAPeriod)
    {
        const int Trials = 100;
        int right = 0;
        double f = 1 / (samplesAPeriod * Dt);
        for (ulong seed = 0; seed < Trials; seed++)
        {
            RingRecord record = Plain with
            {
                Count = 10 * samplesAPeriod,
                Modes = [(f, 0.03, 100, 0.9 * seed), (1.15 * f, 0.03, 100, 2.3 * seed)],
                Seed = seed,
            };
            RingFitResult ring = RingFit.Fit(record.Samples(), Dt, 3);
            right += ring.Order == 2
                && Math.Abs((ring.Modes.Min(mode => mode.Frequency) / f) - 1) < 0.02
                && Math.Abs((ring.Modes.Max(mode => mode.Frequency) / f) - 1.15) < 0.02 ? 1 : 0;
        }

        Assert.InRange(right, 95, Trials);
    }

    [Fact]
    public void Correlated_residuals_widen_the_uncertainty_as_much_as_the_scatter()
    {
        const int Draws = 150;
        double[] errors = new double[Draws];
        double[] stated = new double[Draws];
        for (int draw = 0; draw < Draws; draw++)
        {
            // First-order noise of correlation 0.7 from sample to sample, as a probe's pole makes it.
            double[] white = RingRecord.Noise((ulong)draw, 500);
            double[] samples = (Plain with { Sigma = 0 }).Samples();
            double noise = 0;
            for (int n = 0; n < samples.Length; n++)
            {
                noise = (0.7 * noise) + white[n];
                samples[n] += noise;
            }

            RingMode mode = RingFit.Fit(samples, Dt, 1).Modes[0];
            (errors[draw], stated[draw]) = (mode.Frequency - 35e6, mode.FrequencyUncertainty);
        }

        double scatter = Math.Sqrt(errors.Sum(error => error * error) / Draws);
        // One factor for all unknowns overstates where the ring is faster than the noise: by design on the safe side.
        Assert.InRange(stated.Average() / scatter, 0.8, 2.5);
        double asWhite = 2 * RingFit.Fit(Plain.Samples(), Dt, 1).Modes[0].FrequencyUncertainty;
        Assert.True(stated.Average() > asWhite);
    }

    [Fact]
    public void Scale_and_offset_of_the_samples_change_nothing_but_the_obvious()
    {
        double[] samples = Plain.Samples();
        RingMode reference = RingFit.Fit(samples, Dt, 3).Modes[0];
        Gen.Select(Gen.Double[0.01, 1e6], Gen.Bool, Gen.Double[-10, 10]).Sample((scale, flip, offset) =>
        {
            double factor = flip ? -scale : scale;
            RingMode mode = RingFit.Fit(Make(500, n => factor * (samples[n] + offset)), Dt, 3).Modes[0];
            Assert.InRange(mode.Frequency / reference.Frequency, 1 - 1e-11, 1 + 1e-11);
            Assert.InRange(mode.Damping / reference.Damping, 1 - 1e-9, 1 + 1e-9);
            Assert.InRange(mode.Amplitude / (scale * reference.Amplitude), 1 - 1e-9, 1 + 1e-9);
        });
    }

    [Fact]
    public void The_same_samples_give_the_same_bits()
    {
        double[] samples = (Plain with { Modes = [(35e6, 0.04, 100, 0.3), (80e6, 0.03, 30, 1)] }).Samples();

        RingFitResult first = RingFit.Fit(samples, Dt, 3);
        RingFitResult second = RingFit.Fit(samples, Dt, 3);

        Assert.Equal(first.Modes, second.Modes);
        Assert.Equal(2, first.Order);
    }

    [Fact]
    public void The_window_is_not_modified()
    {
        double[] samples = Plain.Samples();
        double[] before = [.. samples];

        RingFit.Fit(samples, Dt, 3);

        Assert.Equal(before, samples);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(23)]
    public void Fewer_than_four_samples_a_parameter_are_a_reason(int count) =>
        Assert.Equal("fewer than 4 samples a parameter", RingFit.Fit(Plain.Samples().AsSpan(0, count), Dt, 3).Reason);

    [Fact]
    public void Fewer_than_two_periods_are_a_reason() =>
        Assert.Equal("fewer than 2 periods", RingFit.Fit((Plain with { Count = 45 }).Samples(), Dt, 3).Reason);

    [Fact]
    public void Few_samples_limit_the_order_instead_of_failing()
    {
        RingRecord record = Plain with { Count = 39, Modes = [(100e6, 0.03, 100, 0), (180e6, 0.03, 60, 0)], Sigma = 0 };

        Assert.InRange(RingFit.Fit(record.Samples(), Dt, 3).Order, 0, 1);
    }

    [Fact]
    public void Any_finite_samples_give_modes_or_a_reason_and_never_throw() =>
        Gen.OneOf(Gen.Double, Gen.Double[-1, 1], Gen.Const(0.0), Gen.Const(double.MaxValue), Gen.Const(double.Epsilon))
            .Where(double.IsFinite).Array[0, 300]
            .Sample(samples =>
            {
                RingFitResult ring = RingFit.Fit(samples, Dt, 3);
                Assert.Equal(ring.Reason is null, ring.Order > 0);
                Assert.All(ring.Modes, mode => Assert.True(double.IsFinite(mode.Frequency * mode.Damping)));
            });

    [Theory]
    [InlineData(double.NaN)]
    [InlineData(double.PositiveInfinity)]
    public void A_clipped_sample_is_refused(double bad)
    {
        double[] samples = Plain.Samples();
        samples[17] = bad;

        Assert.Throws<ArgumentException>(() => RingFit.Fit(samples, Dt, 3));
    }

    [Theory]
    [InlineData(0, 1)]
    [InlineData(-1e-9, 1)]
    [InlineData(double.NaN, 1)]
    [InlineData(1e-9, 0)]
    [InlineData(1e-9, 4)]
    public void Arguments_outside_their_range_are_refused(double dt, int modes) =>
        Assert.Throws<ArgumentOutOfRangeException>(() => RingFit.Fit(Plain.Samples(), dt, modes));

    private static double[] Make(int count, Func<int, double> value) => [.. Enumerable.Range(0, count).Select(value)];
}
