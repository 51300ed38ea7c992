using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tolerances;
using BenchRunner.Signals.Comparisons;

namespace BenchRunner.Acceptance.Tests.Tolerances;

public sealed class ComparisonVerdictTests
{
    private static readonly ToleranceSet _tolerances = new(
        "ours",
        "a test",
        [new("trr", null, 0.01, default), new("irm", null, 0.02, default)],
        new SourceFile("tolerances", "ours.yaml", []));

    [Theory]
    [InlineData(0.009, -0.019, true)]
    [InlineData(-0.01, 0.02, true)]
    [InlineData(0.011, 0.0, false)]
    [InlineData(0.0, -0.021, false)]
    public void Every_one_must_be_inside_either_way(double trr, double irm, bool isInside) =>
        Assert.Equal(isInside, Judge(trr, irm).IsInside);

    [Fact]
    public void What_was_not_evaluated_is_outside_and_named()
    {
        ComparisonVerdict verdict = Judge(0, null);

        Assert.False(verdict.IsInside);
        Assert.Equal("irm", Assert.Single(verdict.Outside).Scalar.Quantity);
    }

    [Fact]
    public void Nothing_to_judge_is_not_inside() => Assert.False(new ComparisonVerdict([]).IsInside);

    [Fact]
    public void A_comparison_for_other_tolerances_is_refused() =>
        Assert.Throws<ArgumentException>(() => ComparisonVerdict.Judge(Result(Scalar("trr", 0)), _tolerances));

    private static ComparisonVerdict Judge(double? trr, double? irm) =>
        ComparisonVerdict.Judge(Result(Scalar("trr", trr), Scalar("irm", irm)), _tolerances);

    private static ComparisonResult Result(params ScalarComparison[] named) =>
        new([], null, null, null, null, named, []);

    private static ScalarComparison Scalar(string quantity, double? error) => new(
        quantity, quantity + "/rule", "1", 1, 1 + error, error, error is null ? "no level" : null);
}
