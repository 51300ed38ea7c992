using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Tests.Files;

namespace BenchRunner.Acceptance.Tests.Sequences;

public sealed class ShippedFilesTests
{
    [Fact]
    public void The_shipped_sequence_has_no_problem()
    {
        Read<Sequence> read = SequenceFile.Read(Repository.SequencePath);
        Assert.Empty(read.Problems);
    }

    [Theory]
    [InlineData("fake.yaml")]
    [InlineData("four-channel.yaml")]
    public void A_shipped_bench_has_no_problem(string name)
    {
        Read<Bench> read = BenchFile.Read(Repository.PathOf("sequences", "benches", name));
        Assert.Empty(read.Problems);
    }

    [Theory]
    [InlineData("supply")]
    [InlineData("pulser")]
    [InlineData("scope")]
    [InlineData("voltmeter")]
    [InlineData("interlock")]
    public void A_shipped_dialect_has_no_problem(string role)
    {
        Read<DialectFile> read = DialectReader.Read(Repository.PathOf("sequences", "dialects", $"generic-{role}.yaml"));
        Assert.Empty(read.Problems);
    }
}
