using System.Globalization;
using System.Text.Json;
using BenchRunner.Acceptance.Tests.Files;
using BenchRunner.Acceptance.Uncertainty;

namespace BenchRunner.Acceptance.Tests.Uncertainty;

public sealed class CombinedUncertaintyTests
{
    // JCGM 100:2008, H.1 (end gauge), without rounding in between: tests/reference/statistics/gum-h1.json.
    private static readonly JsonElement _gauge = JsonDocument.Parse(
        File.ReadAllText(Repository.PathOf("tests", "reference", "statistics", "gum-h1.json"))).RootElement;

    private static double Input(string name) => _gauge.GetProperty("inputs").GetProperty(name).GetDouble();

    private static double Published(string name) => _gauge.GetProperty("published").GetProperty(name).GetDouble();

    private static double Exact(string name) =>
        _gauge.GetProperty("recomputed_unrounded_inputs").GetProperty(name).GetDouble();

    private static CombinedUncertainty Comparison()
    {
        double pooled = Input("pooled_s_nm") / Math.Sqrt(Input("n_mean"));
        double random = Input("comparator_random_95_nm") / StudentT.Factor(0.95, Input("nu_random"));
        double systematic = Input("comparator_systematic_3sigma_nm") / 3;
        return CombinedUncertainty.Of(
            [
                new UncertaintyEntry("repeated observations", pooled, 1, Input("nu_pooled")),
                new UncertaintyEntry("comparator, random", random, 1, Input("nu_random")),
                new UncertaintyEntry("comparator, systematic", systematic, 1, Input("nu_systematic")),
            ],
            0.95);
    }

    private static CombinedUncertainty Gauge(double coverage)
    {
        CombinedUncertainty difference = Comparison();
        double length = Input("lS_nm");
        return CombinedUncertainty.Of(
            [
                new UncertaintyEntry("standard", Input("U_lS_nm") / Input("k_lS"), 1, Input("nu_lS")),
                new UncertaintyEntry("difference", difference.Standard, 1, difference.DegreesOfFreedom),
                new UncertaintyEntry(
                    "expansion", Input("dalpha_halfwidth") / Math.Sqrt(3), -length * Input("theta_K"),
                        Input("nu_dalpha")),
                new UncertaintyEntry(
                    "temperature", Input("dtheta_halfwidth_K") / Math.Sqrt(3), -length * Input("alphaS_per_K"),
                        Input("nu_dtheta")),
            ],
            coverage);
    }

    [Fact]
    public void The_end_gauge_of_the_guide_has_its_uncertainty()
    {
        CombinedUncertainty gauge = Gauge(0.99);
        Assert.Equal(Exact("u_c_nm"), gauge.Standard, 1e-9 * Exact("u_c_nm"));
        Assert.Equal(Exact("nu_eff"), gauge.DegreesOfFreedom, 1e-9 * Exact("nu_eff"));
        Assert.Equal(Exact("k99"), gauge.CoverageFactor, 1e-10);
        Assert.Equal(Exact("U99_nm"), gauge.Expanded, 1e-9 * Exact("U99_nm"));
        Assert.Equal(Exact("U95_nm"), Gauge(0.95).Expanded, 1e-9 * Exact("U95_nm"));
        Assert.Equal(Published("u_c_nm"), gauge.Standard, 0.5);
        Assert.Equal(Published("nu_eff"), gauge.DegreesOfFreedom, 0.1);
        Assert.Equal(Published("k99"), gauge.CoverageFactor, 0.005);
    }

    [Fact]
    public void The_difference_of_two_gauges_in_the_guide_has_its_uncertainty()
    {
        Assert.Equal(Exact("u_d_nm"), Comparison().Standard, 1e-9 * Exact("u_d_nm"));
        Assert.Equal(Exact("nu_d"), Comparison().DegreesOfFreedom, 1e-9 * Exact("nu_d"));
    }

    [Fact]
    public void Charges_of_nanocoulombs_combine_like_numbers_near_one()
    {
        UncertaintyEntry[] near = [new("a", 3, 1, 4), new("b", 4, -1)];
        UncertaintyEntry[] tiny = [new("a", 3, 1e-90, 4), new("b", 4, -1e-90)];
        Assert.Equal(5, CombinedUncertainty.Of(near, 0.95).Standard, 1e-12);
        Assert.Equal(4 * 625.0 / 81, CombinedUncertainty.Of(near, 0.95).DegreesOfFreedom, 1e-9);
        Assert.Equal(4 * 625.0 / 81, CombinedUncertainty.Of(tiny, 0.95).DegreesOfFreedom, 1e-9);
    }

    [Fact]
    public void Without_any_contribution_there_is_no_uncertainty_and_no_doubt_about_it()
    {
        CombinedUncertainty none = CombinedUncertainty.Of([new UncertaintyEntry("spread", 0, 1, 4)], 0.95);
        Assert.Equal(0, none.Expanded);
        Assert.Equal(double.PositiveInfinity, none.DegreesOfFreedom);
    }

    [Fact]
    public void Coverage_factors_are_the_quantiles_of_the_normal_and_of_students_t()
    {
        // Quantiles: tests/reference/statistics/quantiles-t-normal.csv. Broken degrees of freedom are cut (JCGM 100,
        // G.4.1).
        int held = 0;
        foreach (string line in File.ReadLines(
            Repository.PathOf("tests", "reference", "statistics", "quantiles-t-normal.csv")).Skip(1))
        {
            string[] cells = line.Split(',');
            double probability = double.Parse(cells[1], CultureInfo.InvariantCulture);
            double freedom = cells[0] == "normal" ? double.PositiveInfinity
                : double.Parse(cells[2], CultureInfo.InvariantCulture);
            double quantile = double.Parse(cells[5], CultureInfo.InvariantCulture);
            if (freedom == Math.Floor(freedom) && probability > 0.5)
            {
                // The library's search for a quantile stops at a few 1e-9 of it.
                Assert.Equal(quantile, StudentT.Factor((2 * probability) - 1, freedom), 1e-8 * quantile);
                held++;
            }
        }

        Assert.True(held > 50, $"only {held} quantiles were held");
        Assert.Equal(Exact("k95"), StudentT.Factor(0.95, 16.99), 1e-10);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(double.NaN)]
    public void A_coverage_that_is_no_probability_is_refused(double coverage) =>
        Assert.Throws<ArgumentOutOfRangeException>(() => StudentT.Factor(coverage, 4));

    [Fact]
    public void A_spread_is_that_of_a_sample()
    {
        Spread spread = Spread.Of([9, 10, 11, 12, 8]);
        Assert.Equal(10, spread.Mean);
        Assert.Equal(Math.Sqrt(2.5), spread.StandardDeviation, 1e-12);
        Assert.Equal(Math.Sqrt(0.5), spread.OfMean, 1e-12);
        Assert.True(double.IsNaN(Spread.Of([1]).OfMean));
    }
}
