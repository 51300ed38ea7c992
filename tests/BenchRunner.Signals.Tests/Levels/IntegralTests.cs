using BenchRunner.Signals.Levels;
using CsCheck;

namespace BenchRunner.Signals.Tests.Levels;

public sealed class IntegralTests
{
    private static readonly Gen<(double[] Samples, double A, double B, double C)> _intervals =
        Gen.Double[-200, 200].Array[3, 300].SelectMany(s =>
            Gen.Double[0, s.Length - 1].Array[3].Select(p => (s, p.Min(), p.Order().ElementAt(1), p.Max())));

    [Fact]
    public void A_charge_is_additive_over_adjacent_windows() => _intervals.Sample(w => Near(
        Integral.Of(w.Samples, w.A, w.B) + Integral.Of(w.Samples, w.B, w.C),
        Integral.Of(w.Samples, w.A, w.C),
        w.Samples));

    [Fact]
    public void An_energy_is_additive_over_adjacent_windows() => _intervals.Sample(w =>
    {
        double[] other = [.. w.Samples.Reverse()];
        Near(
            Integral.OfProduct(w.Samples, other, w.A, w.B) + Integral.OfProduct(w.Samples, other, w.B, w.C),
            Integral.OfProduct(w.Samples, other, w.A, w.C),
            [.. w.Samples.Select(x => x * 200)]);
    });

    [Fact]
    public void A_product_with_one_is_the_integral() => _intervals.Sample(w => Near(
        Integral.OfProduct(w.Samples, [.. w.Samples.Select(_ => 1.0)], w.A, w.C),
        Integral.Of(w.Samples, w.A, w.C),
        w.Samples));

    [Fact]
    public void A_product_is_a_straight_line_between_samples() =>
        Assert.Equal(0.5, Integral.OfProduct([0, 1], [0, 1], 0, 1), 15);

    [Fact]
    public void An_interval_outside_the_samples_is_refused()
    {
        Assert.Throws<ArgumentOutOfRangeException>(() => Integral.Of([1, 2], 0, 1.5));
        Assert.Throws<ArgumentOutOfRangeException>(() => Integral.Of([1, 2], 1, 0.5));
        Assert.Throws<ArgumentOutOfRangeException>(() => Integral.Of([1, 2], double.NaN, 1));
    }

    private static void Near(double expected, double actual, double[] scale) =>
        Assert.True(Math.Abs(expected - actual) <= 1e-12 * scale.Sum(Math.Abs), $"{expected} {actual}");
}
