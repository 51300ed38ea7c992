using System.Globalization;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Tests.Files;
using CsCheck;
using MathNet.Numerics.Distributions;

namespace BenchRunner.Acceptance.Tests.Decisions;

public sealed class ConformityRuleTests
{
    private static readonly DecisionRule _guarded = new();

    [Theory]
    [InlineData(9.0, Conformity.Conforms)]
    [InlineData(9.5, Conformity.Conforms)]
    [InlineData(9.6, Conformity.Undecided)]
    [InlineData(10.0, Conformity.Undecided)]
    [InlineData(10.5, Conformity.Undecided)]
    [InlineData(10.6, Conformity.Fails)]
    public void A_guarded_upper_limit_leaves_twice_the_uncertainty_open(double value, Conformity expected) =>
        Assert.Equal(expected, ConformityRule.Decide(value, 0.5, null, 10, _guarded));

    [Theory]
    [InlineData(0.4, Conformity.Fails)]
    [InlineData(1.0, Conformity.Undecided)]
    [InlineData(1.5, Conformity.Conforms)]
    public void A_guarded_lower_limit_mirrors_it(double value, Conformity expected) =>
        Assert.Equal(expected, ConformityRule.Decide(value, 0.5, 1, null, _guarded));

    [Fact]
    public void The_simple_rule_knows_no_open_values_and_needs_no_uncertainty()
    {
        var simple = new DecisionRule(Guarded: false);
        Assert.Equal(Conformity.Conforms, ConformityRule.Decide(10, null, 0, 10, simple));
        Assert.Equal(Conformity.Fails, ConformityRule.Decide(10.0001, 5, 0, 10, simple));
    }

    [Fact]
    public void A_guarded_value_without_uncertainty_is_undecided() =>
        Assert.Equal(Conformity.Undecided, ConformityRule.Decide(1, null, null, 10, _guarded));

    [Fact]
    public void A_value_on_the_acceptance_limit_is_bad_as_often_as_the_table_says()
    {
        // Guard bands and one-sided risks: tests/reference/statistics/guardband-factors.csv (U at k = 2, u = 1).
        int held = 0;
        foreach (string line in File.ReadLines(
            Repository.PathOf("tests", "reference", "statistics", "guardband-factors.csv")).Skip(1))
        {
            string[] cells = line.Split(',');
            double factor = double.Parse(cells[1], CultureInfo.InvariantCulture);
            double risk = double.Parse(cells[3], CultureInfo.InvariantCulture);
            if (factor < 0)
            {
                continue;
            }

            const double expanded = 2;
            double highest = HighestConforming(100, expanded, new DecisionRule(GuardFactor: factor));
            Assert.Equal(risk, Normal.CDF(0, 1, -(100 - highest)), 1e-10);
            held++;
        }

        Assert.Equal(13, held);
    }

    [Fact]
    public void More_uncertainty_never_turns_an_open_value_into_a_decided_one() =>
        Gen.Select(Gen.Double[-5, 15], Gen.Double[0, 3], Gen.Double[0, 3]).Sample((value, small, more) =>
            ConformityRule.Decide(value, small, 0, 10, _guarded) != Conformity.Undecided
            || ConformityRule.Decide(value, small + more, 0, 10, _guarded) == Conformity.Undecided);

    private static double HighestConforming(double limit, double expanded, DecisionRule rule)
    {
        double good = limit - 50;
        double bad = limit + 50;
        for (int i = 0; i < 200; i++)
        {
            double middle = (good + bad) / 2;
            bool conforms = ConformityRule.Decide(middle, expanded, null, limit, rule) == Conformity.Conforms;
            (good, bad) = conforms ? (middle, bad) : (good, middle);
        }

        return good;
    }
}
