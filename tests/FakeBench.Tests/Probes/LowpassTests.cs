using FakeBench.Probes;
using FakeBench.Tests.Physics;

namespace FakeBench.Tests.Probes;

/// <summary>Delay and one-pole filter against the closed forms for a step, a ramp and a sine.</summary>
public sealed class LowpassTests
{
    [Theory]
    [InlineData(0.02)]
    [InlineData(0.5)]
    [InlineData(3)]
    public void A_sine_comes_out_with_the_gain_and_phase_of_one_pole(double ratio)
    {
        // 60 samples a period: the cubic through four of them is exact to 1e-5 there.
        const double turn = 2 * Math.PI / 60;
        var y = new double[4000];
        for (int i = 0; i < y.Length; i++) y[i] = Math.Sin(turn * i);
        Lowpass.Filter(y, ratio);
        double wt = turn / ratio;
        double gain = 1 / Math.Sqrt(1 + wt * wt);
        double phase = Math.Atan(wt);
        for (int i = 3000; i < 3990; i++) Assert.Equal(gain * Math.Sin(turn * i - phase), y[i], 2e-5);
    }

    [Fact]
    public void A_ramp_comes_out_late_by_the_time_constant()
    {
        var y = new double[400];
        for (int i = 0; i < y.Length; i++) y[i] = i;
        Lowpass.Filter(y, 0.25);

        for (int i = 200; i < 398; i++) Approximately.Equal(i - 4, y[i], 1e-9);
    }

    [Fact]
    public void A_constant_stays_and_no_bandwidth_limit_changes_nothing()
    {
        var y = Enumerable.Repeat(7.5, 50).ToArray();
        Lowpass.Filter(y, 0.3);
        Assert.All(y, v => Assert.Equal(7.5, v, 1e-12));

        var same = Enumerable.Range(0, 50).Select(i => Math.Sqrt(i)).ToArray();
        var copy = (double[])same.Clone();
        Lowpass.Filter(copy, double.PositiveInfinity);
        Assert.Equal(same, copy);
    }

    [Theory]
    [InlineData(0.3)]
    [InlineData(-0.7)]
    [InlineData(4.25)]
    [InlineData(-11)]
    public void A_delay_moves_a_cubic_exactly(double delay)
    {
        static double Cubic(double t) => 1 + 0.5 * t - 0.02 * t * t + 0.0003 * t * t * t;
        var y = Enumerable.Range(0, 200).Select(i => Cubic(i)).ToArray();
        var late = new double[y.Length];
        Lowpass.Delay(y, delay, late);

        for (int i = 20; i < 180; i++) Approximately.Equal(Cubic(i - delay), late[i], 1e-9);
    }

    [Fact]
    public void Beyond_the_ends_the_first_and_last_value_stay()
    {
        double[] y = [1, 2, 3, 4, 5];
        var late = new double[5];
        Lowpass.Delay(y, 100.5, late);
        Assert.Equal([1, 1, 1, 1, 1], late);
        Lowpass.Delay(y, -100.5, late);
        Assert.Equal([5, 5, 5, 5, 5], late);
    }
}
