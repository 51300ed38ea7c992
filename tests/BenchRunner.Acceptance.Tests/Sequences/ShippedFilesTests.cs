using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Tests.Files;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Tests.Sequences;

/// <summary>What users and other programs count on in the files that ship.</summary>
public sealed partial class ShippedFilesTests
{
    public static TheoryData<string> Benches => Names("benches");

    public static TheoryData<string> Dialects => Names("dialects");

    [Fact]
    public void The_sequence_has_no_problem() => Assert.Empty(SequenceFile.Read(Repository.SequencePath).Problems);

    [Fact]
    public void The_sequence_tests_a_module_at_two_points_with_five_captures_each()
    {
        Sequence sequence = SequenceFile.Read(Repository.SequencePath).Value!;
        Assert.Equal(DevicePosition.Both, sequence.Position);
        Assert.Equal("W1200-[0-9]{4}", sequence.SerialForm);
        Assert.Equal(
            [(400.0, 20.0, 0.25), (600.0, 40.0, 0.25)],
            sequence.OperatingPoints.Select(point => (point.BusVoltage, point.LoadCurrent, point.RepeatEvery)));
        Assert.Equal(5, sequence.ValidCaptures);
        Assert.True(sequence.Limits.Count >= 8);
        Assert.All(sequence.OperatingPoints, point => Assert.Null(point.Temperature));
    }

    [Fact]
    public void Each_limit_is_a_flow_mapping_on_one_line()
    {
        string text = Examples.Sequence;
        int start = text.IndexOf("\nlimits:\n", StringComparison.Ordinal) + "\nlimits:\n".Length;
        string[] lines = text[start..text.IndexOf("\n\n", start, StringComparison.Ordinal)].Split('\n');
        Assert.All(lines, line => Assert.Matches(OneLimit(), line));
        Assert.Equal(SequenceFile.Read(Repository.SequencePath).Value!.Limits.Count, lines.Length);
    }

    [Fact]
    public void The_bus_voltage_stands_on_a_line_of_its_own_and_in_no_comment()
    {
        IEnumerable<string> named = Examples.Sequence.Split('\n')
            .Where(line => line.Contains("bus-voltage", StringComparison.Ordinal));
        Assert.Equal(["    bus-voltage: 400 V", "    bus-voltage: 600 V"], named);
    }

    [Theory]
    [InlineData("winch-drive-incoming", "fake")]
    [InlineData("winch-drive-incoming", "four-channel")]
    [InlineData("winch-drive-incoming", "hot-plate")]
    [InlineData("winch-drive-hot", "hot-plate")]
    [InlineData("winch-drive-high", "negative-load")]
    public void A_sequence_is_planned_on_its_bench_and_nothing_is_left_unsaid(string sequence, string bench)
    {
        Read<Sequence> read = SequenceFile.Read(Repository.PathOf("sequences", sequence + ".yaml"));
        Assert.Empty(read.Problems);
        Planned planned = Planner.Plan(
            read.Value!, BenchFile.Read(Repository.PathOf("sequences", "benches", bench + ".yaml")).Value!);
        Assert.Empty(planned.Refusals.Select(problem => problem.ToString()));
        Assert.Empty(planned.Notes.Select(problem => problem.ToString()));
    }

    [Theory]
    [InlineData("winch-drive-hot", "fake", "no hotplate")]
    [InlineData("winch-drive-high", "fake", "the high switch fires")]
    [InlineData("winch-drive-incoming", "negative-load", "the low switch fires")]
    public void A_sequence_is_refused_on_a_bench_that_is_not_for_it(string sequence, string bench, string why) =>
        Assert.Contains(
            Planner.Plan(
                SequenceFile.Read(Repository.PathOf("sequences", sequence + ".yaml")).Value!,
                BenchFile.Read(Repository.PathOf("sequences", "benches", bench + ".yaml")).Value!).Refusals,
            problem => problem.ToString().Contains(why, StringComparison.Ordinal));

    [Fact]
    public void Every_shipped_sequence_is_planned_by_a_test() =>
        Assert.Equal(
            ["winch-drive-high.yaml", "winch-drive-hot.yaml", "winch-drive-incoming.yaml"],
            Directory.GetFiles(Repository.PathOf("sequences"), "*.yaml").Select(Path.GetFileName).Order());

    [Theory]
    [MemberData(nameof(Benches))]
    public void A_bench_has_no_problem(string name) =>
        Assert.Empty(BenchFile.Read(Repository.PathOf("sequences", "benches", name)).Problems);

    [Theory]
    [MemberData(nameof(Benches))]
    public void The_dialects_of_a_bench_are_found_for_their_roles(string name)
    {
        Bench bench = BenchFile.Read(Repository.PathOf("sequences", "benches", name)).Value!;
        string[] folders = [Repository.PathOf("sequences", "dialects")];
        Assert.All(bench.Roles, role => Assert.Empty(
            DialectReader.Find(role.Value.Dialect, role.Key, folders, role.Value.Where).Problems));
    }

    [Theory]
    [MemberData(nameof(Dialects))]
    public void A_dialect_has_no_problem(string name) =>
        Assert.Empty(DialectReader.Read(Repository.PathOf("sequences", "dialects", name)).Problems);

    private static TheoryData<string> Names(string folder) =>
    [
        .. Directory.GetFiles(Repository.PathOf("sequences", folder), "*.yaml")
            .Select(path => Path.GetFileName(path))
            .Order(),
    ];

    [GeneratedRegex(@"^  - \{ quantity: [a-z0-9_]+, at: (half|rated), (at-most|at-least|between): [^{}]+ \}$")]
    private static partial Regex OneLimit();
}
