using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tests.Files;

namespace BenchRunner.Acceptance.Tests.Dialects;

public sealed class DialectReaderTests
{
    private static readonly Place _where = new("bench.yaml", 5, 3);

    public static TheoryData<string> Roles => [.. RoleOperations.All.Keys];

    [Theory]
    [MemberData(nameof(Roles))]
    public void The_generic_dialect_of_a_role_has_its_operations_and_no_others(string role)
    {
        DialectFile dialect = DialectReader.Read(GenericPath(role)).Value!;
        Assert.Equal((role, $"generic-{role}"), (dialect.Role, dialect.Name));
        Assert.Subset(Names(role, optionalToo: true), dialect.Commands.Keys.ToHashSet());
        Assert.Superset(Names(role, optionalToo: false), dialect.Commands.Keys.ToHashSet());
    }

    [Fact]
    public void Commands_arrive_with_their_placeholders()
    {
        DialectFile dialect = DialectReader.Read(GenericPath("scope")).Value!;
        Assert.Equal("SENSe:VOLTage{channel}:DC:RANGe:UPPer {value}", dialect.Commands["set-range"]);
        Assert.Null(dialect.Identity);
    }

    [Theory]
    [MemberData(nameof(Roles))]
    public void Misspelling_any_operation_is_a_problem(string role)
    {
        string text = File.ReadAllText(GenericPath(role));
        foreach (RoleOperation operation in RoleOperations.All[role]
            .Where(o => text.Contains($"  {o.Name}:", StringComparison.Ordinal)))
        {
            string wrong = text.With($"  {operation.Name}:", $"  {operation.Name}s:");
            Problem problem = Assert.Single(Readers.Problems(Readers.Source("dialect.yaml", wrong)));
            Assert.Equal($"did you mean {operation.Name}?", problem.Advice);
        }
    }

    [Fact]
    public void An_operation_that_not_every_scope_can_do_may_be_left_out()
    {
        string lines = string.Join(
            '\n', File.ReadLines(GenericPath("scope")).Where(l => !l.StartsWith("  degauss:", StringComparison.Ordinal)));
        Assert.Empty(Readers.Problems(Readers.Source("dialect.yaml", lines + "\n")));
    }

    [Fact]
    public void A_dialect_is_looked_for_in_each_folder_in_turn()
    {
        string[] folders = [Repository.PathOf("sequences", "benches"), Repository.PathOf("sequences", "dialects")];
        Assert.Equal("generic-supply", DialectReader.Find("generic-supply", "supply", folders, _where).Value?.Name);
    }

    [Theory]
    [InlineData(
        "generic-supply", "pulser", "the file of the dialect generic-supply holds generic-supply for the role supply")]
    [InlineData("sturdy-supply", "supply", "there is no dialect sturdy-supply")]
    [InlineData("../winch-drive-incoming", "supply", "the dialect is '../winch-drive-incoming'")]
    public void A_dialect_that_is_not_there_or_not_for_the_role_is_a_problem_of_the_bench_file(
        string name, string role, string found)
    {
        Read<DialectFile> read =
            DialectReader.Find(name, role, [Repository.PathOf("sequences", "dialects")], _where);
        Problem problem = Assert.Single(read.Problems);
        Assert.Equal((_where, found), (problem.Where, problem.Found));
    }

    [Fact]
    public void A_link_that_leads_out_of_the_folder_is_not_followed()
    {
        string folder = Directory.CreateTempSubdirectory("dialects").FullName;
        try
        {
            File.CreateSymbolicLink(Path.Combine(folder, "generic-supply.yaml"), GenericPath("supply"));
            Read<DialectFile> read = DialectReader.Find("generic-supply", "supply", [folder], _where);
            Problem problem = Assert.Single(read.Problems);
            Assert.Contains("outside", problem.Found, StringComparison.Ordinal);
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
        }
    }

    private static HashSet<string> Names(string role, bool optionalToo) =>
        [.. RoleOperations.All[role].Where(o => optionalToo || !o.IsOptional).Select(o => o.Name)];

    private static string GenericPath(string role) =>
        Repository.PathOf("sequences", "dialects", $"generic-{role}.yaml");
}
