using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Physics;

/// <summary>The plan says beforehand what the captures then say: which criteria they cannot be judged by.</summary>
public sealed class NotEvaluatedCriteriaTests
{
    private static readonly Sequence _sequence = Shipped.Rated with { Limits = [] };

    public static TheoryData<string, string[]> Benches => new()
    {
        { "six channels", ["temperature-within"] },
        { "four channels", ["bus-droop", "high-side-off", "temperature-within"] },
        { "no bus", ["bus-droop", "temperature-within"] },
        { "no threshold", ["high-side-off", "temperature-within"] },
        { "hotplate", ["temperature-within"] },
    };

    [Theory]
    [MemberData(nameof(Benches))]
    public void What_a_bench_cannot_evaluate_is_said_by_the_plan_and_by_each_capture(string name, string[] expected)
    {
        Bench bench = BenchOf(name);
        Assert.Equal(expected, NotEvaluatedCriteria.Of(_sequence, bench).Select(open => open.Criterion));
        PlannedPoint planned = Shipped.Point(_sequence, bench);
        CaptureContext context = PointLoop.Context(
            new FiredBench(_sequence, bench), planned, PointLoop.Start(planned), planned.Ranges, [], 1);
        Verdict verdict = CaptureValidity.Judge(context with { Zero = PointLoop.Zero(context) });
        Assert.Equal(expected.Order(), verdict.NotEvaluated.Order());
    }

    [Fact]
    public void The_points_at_ambient_on_a_bench_with_a_hotplate_are_named()
    {
        OperatingPoint rated = _sequence.OperatingPoints[0];
        Sequence mixed = _sequence with
        {
            OperatingPoints = [rated with { Name = "cold" }, rated with { Name = "hot", Temperature = 125 }],
        };
        Assert.Equal(
            "cold: at ambient, no temperature is set",
            Assert.Single(NotEvaluatedCriteria.Of(mixed, BenchOf("hotplate"))).Because);
        Sequence hot = mixed with { OperatingPoints = [mixed.OperatingPoints[1]] };
        Assert.Empty(NotEvaluatedCriteria.Of(hot, BenchOf("hotplate")));
    }

    private static Bench BenchOf(string name) => name switch
    {
        "six channels" => Shipped.Bench,
        "four channels" => Shipped.FourChannels,
        "no bus" => Shipped.Bench with
        {
            Channels = [.. Shipped.Bench.Channels.Where(setup => setup.Channel != Channel.Vbus)],
        },
        "no threshold" => Shipped.Bench with { HighSideThreshold = null },
        _ => Shipped.Bench with
        {
            Roles = new Dictionary<string, InstrumentSetup>(Shipped.Bench.Roles)
            {
                ["hotplate"] = Shipped.Bench.Roles["scope"],
            },
        },
    };
}
