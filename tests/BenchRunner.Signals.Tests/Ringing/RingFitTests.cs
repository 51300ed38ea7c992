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
    public void A_ring_on_the_tail_of_a_recovery_is_found_beside_it()
    {
        double[] ring = (Plain with { C = 0, Modes = [(60e6, 0.03, 20, 0)], Sigma = 0.2 }).Samples();

        RingFitResult found = RingFit.Fit(Make(500, n => ring[n] + (150 * Math.Exp(-n / 80.0))), Dt, 3);

        Assert.Equal(1, found.Order);
        Assert.InRange(found.Modes[0].Frequency, 60e6 * 0.999, 60e6 * 1.001);
        Assert.InRange(found.Modes[0].Amplitude, 19.5, 20.5);
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
