using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Tests.Files;

namespace BenchRunner.Acceptance.Tests.Plans;

public sealed class ShippedPlanTests
{
    private static Planned Shipped(string bench) => Planner.Plan(
        SequenceFile.Read(Repository.PathOf("sequences", "winch-drive-incoming.yaml")).Value!,
        BenchFile.Read(Repository.PathOf("sequences", "benches", bench)).Value!);

    [Theory]
    [InlineData("fake.yaml")]
    [InlineData("four-channel.yaml")]
    public void The_shipped_sequence_is_refused_by_neither_shipped_bench(string bench) =>
        Assert.Empty(Shipped(bench).Refusals.Select(problem => problem.ToString()));
}
