using BenchRunner.Signals.Fitting;
using BenchRunner.Signals.LoadCurrent;

namespace BenchRunner.Signals.Tests.Standards;

/// <summary>
/// The search under the ring fit, and the line under the load current, on the statistical reference data sets of NIST
/// (StRD), certified there to 11 digits (nonlinear) and 15 (linear).
/// </summary>
public sealed class NistTests
{
    [Theory]
    [InlineData("Misra1a")]
    [InlineData("DanWood")]
    [InlineData("BoxBOD")]
    [InlineData("Lanczos1")]
    [InlineData("Lanczos3")]
    [InlineData("Eckerle4")]
    [InlineData("Gauss1")]
    [InlineData("Thurber")]
    [InlineData("MGH09")]
    [InlineData("Rat43")]
    public void Nonlinear_sets_come_out_to_eight_certified_digits_from_the_second_start(string name)
    {
        NistSet set = NistSet.Nonlinear(name);

        Agree(set, 1e-8);
        // The data of Lanczos1 are exact but for their 13 printed digits: its squares, 1e-25, are those of rounding.
        if (name != "Lanczos1")
        {
            Near(set.CertifiedSquares, set.Squares, 1e-8);
            Near(set.Deviations, set.Spread(), 1e-8);
        }
    }

    [Theory]
    [InlineData("Norris")]
    [InlineData("Pontius")]
    [InlineData("Wampler4")]
    public void Linear_sets_come_out_to_ten_certified_digits(string name)
    {
        NistSet set = NistSet.Linear(name);

        Agree(set, 1e-10);
        Near(set.CertifiedSquares, set.Squares, 1e-10);
        Near(set.Deviations, set.Spread(), 1e-10);
    }

    /// <summary>
    /// The loads of Pontius are equally spaced, each measured twice. What the certified parabola b1 + b2 x + b3 x²
    /// leaves of the data is at right angles to 1 and x, so that the line of least squares through the data is that
    /// through the parabola: slope b2 + 2 b3 x̄, and b1 + b2 x̄ + b3 (x² on average) at x̄.
    /// </summary>
    [Fact]
    public void The_line_of_the_load_current_holds_to_eleven_digits()
    {
        NistSet set = NistSet.Linear("Pontius");
        int loads = set.X.Length / 2;
        double step = set.X[1] - set.X[0];
        double[] samples = [.. Enumerable.Range(0, loads).Select(i => (set.Y[i] + set.Y[i + loads]) / 2)];

        Line line = Line.Fit(samples, 0, loads - 1)!.Value;

        double mean = set.X.Average(), square = set.X.Average(x => x * x);
        double[] b = set.Certified;
        Near(mean, set.X[0] + (line.Centre * step), 1e-15);
        Near(b[1] + (2 * b[2] * mean), line.Slope / step, 1e-11);
        Near(b[0] + (b[1] * mean) + (b[2] * square), line.Value, 1e-11);
    }

    [Fact]
    public void A_start_of_another_length_is_refused()
    {
        LevenbergMarquardt search = new(NistSet.Nonlinear("DanWood"));

        Assert.Throws<ArgumentException>(() => search.Start([1]));
    }

    [Fact]
    public void A_search_that_cannot_reach_its_target_says_so()
    {
        NistSet set = NistSet.Nonlinear("DanWood");
        LevenbergMarquardt search = new(set);

        Assert.True(search.Start(set.Start));
        Assert.False(search.Search(target: set.CertifiedSquares / 2));
        Assert.True(search.Search(target: set.CertifiedSquares * 2));
    }

    private static void Agree(NistSet set, double relative)
    {
        LevenbergMarquardt search = new(set);
        Assert.True(search.Start(set.Start));
        Assert.True(search.Search());
        Near(set.Certified, search.Unknowns, relative);
    }

    private static void Near(ReadOnlySpan<double> expected, ReadOnlySpan<double> actual, double relative)
    {
        for (int i = 0; i < expected.Length; i++)
        {
            Near(expected[i], actual[i], relative);
        }
    }

    private static void Near(double expected, double actual, double relative) =>
        Assert.InRange((actual / expected) - 1, -relative, relative);
}
