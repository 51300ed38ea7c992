using BenchRunner.Signals.Comparisons;

namespace BenchRunner.Signals.Tests.Comparisons;

public sealed class AlignmentTests
{
    // A ring at a fourteenth of the sampling rate: 70 MHz at 1 GS/s.
    private const double Period = 14;

    [Theory]
    [InlineData(0)]
    [InlineData(0.37)]
    [InlineData(-2.5)]
    [InlineData(7.83)]
    public void A_known_shift_is_found_to_a_fiftieth_of_a_sample(double shift)
    {
        double[] reference = [.. Enumerable.Range(0, 600).Select(i => Ring(i))];
        double[] measured = [.. Enumerable.Range(0, 300).Select(i => 5 + (1.2 * Ring(100 + i - shift)))];

        Alignment found = Alignment.Find(measured, reference, 100, 1, 0, 20)!.Value;

        Assert.Equal(shift, found.Shift, 0.02);
        Assert.Equal(1, found.Correlation, 1e-3);
    }

    [Theory]
    [InlineData(1)]
    [InlineData(2)]
    [InlineData(3)]
    public void A_known_shift_is_found_under_noise_of_a_half_percent(int seed)
    {
        var random = new Random(seed);
        double[] reference = [.. Enumerable.Range(0, 600).Select(i => Ring(i))];
        double[] measured =
            [.. Enumerable.Range(0, 300).Select(i => Ring(100 + i - 3.21) + (0.005 * Normal(random)))];

        Assert.Equal(3.21, Alignment.Find(measured, reference, 100, 1, 0, 20)!.Value.Shift, 0.02);
    }

    [Fact]
    public void Records_of_other_sample_intervals_are_aligned()
    {
        double[] reference = [.. Enumerable.Range(0, 1500).Select(i => Ring(i * 0.4))];
        double[] measured = [.. Enumerable.Range(0, 300).Select(i => Ring(100 + i - 1.61))];

        Assert.Equal(1.61, Alignment.Find(measured, reference, 250, 2.5, 0, 20)!.Value.Shift, 0.02);
    }

    [Fact]
    public void A_shift_beyond_the_reach_is_none()
    {
        double[] reference = [.. Enumerable.Range(0, 600).Select(i => Math.Tanh((i - 200) / 20.0))];
        double[] measured = [.. Enumerable.Range(0, 300).Select(i => Math.Tanh((100 + i - 260) / 20.0))];

        Assert.Null(Alignment.Find(measured, reference, 100, 1, 0, 20));
        Assert.Equal(60, Alignment.Find(measured, reference, 100, 1, 0, 80)!.Value.Shift, 0.02);
    }

    [Fact]
    public void A_flat_record_is_not_aligned() =>
        Assert.Null(Alignment.Find(new double[100], new double[300], 100, 1, 0, 20));

    [Fact]
    public void Without_edges_the_spectra_say_about_where()
    {
        double[] reference = [.. Enumerable.Range(0, 3000).Select(i => Ring((i * 0.5) - 700))];
        double[] measured = [.. Enumerable.Range(0, 900).Select(i => Ring(i - 400))];

        double guess = Alignment.Guess(measured, reference, 0, 2)!.Value;

        Assert.Equal(-300, guess, 1.5);
        Assert.Equal(-300, Alignment.Find(measured, reference, 0, 2, guess, 20)!.Value.Shift, 0.02);
    }

    /// <summary>A step, then a damped ring, as of a diode's voltage after the turn-on.</summary>
    private static double Ring(double t) => t < 150
        ? -1 / (1 + Math.Exp((t - 142) / 1.5))
        : 1 / (1 + Math.Exp(-(t - 142) / 1.5)) - 1
            + ((1 - Math.Exp(-(t - 150) / 4)) * Math.Exp(-(t - 150) / 60) * Math.Sin(2 * Math.PI * (t - 150) / Period));

    private static double Normal(Random random) =>
        Math.Sqrt(-2 * Math.Log(1 - random.NextDouble())) * Math.Cos(2 * Math.PI * random.NextDouble());
}
