using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tests.Files;

namespace BenchRunner.Acceptance.Tests.Dialects;

public sealed class WireKeysTests
{
    private static readonly string _voltmeter =
        File.ReadAllText(Repository.PathOf("sequences", "dialects", "generic-voltmeter.yaml"));

    [Fact]
    public void A_dialect_without_the_block_is_by_the_standard() => Assert.Equal(
        WireHabits.Standard,
        DialectReader.Read(Repository.PathOf("sequences", "dialects", "generic-supply.yaml")).Value!.Wire);

    [Fact]
    public void The_generic_voltmeter_and_interlock_are_asked_with_numbers()
    {
        Assert.True(Wire("{ numbered: true }").Numbered);
        Assert.True(DialectReader.Read(
            Repository.PathOf("sequences", "dialects", "generic-interlock.yaml")).Value!.Wire.Numbered);
    }

    [Fact]
    public void Every_habit_arrives() => Assert.Equal(
        new WireHabits("CR", "ERRor:NEXT?", false, true, true, "TRACE ", false, false),
        Wire("{ terminator: CR, error-query: 'ERRor:NEXT?', operation-complete: false, recovery: reopen, echo: true, "
            + "block-before: 'TRACE ', block-end: none }"));

    [Fact]
    public void An_instrument_may_have_no_error_queue() =>
        Assert.Equal(WireHabits.Standard with { ErrorQuery = null, Terminator = "CR NL" },
            Wire("{ error-query: none, terminator: CR NL }"));

    [Theory]
    [InlineData("{ terminator: LF }", "terminator is 'LF'", "NL, CR NL or CR", "write one of them")]
    [InlineData("{ error-query: 'SYST:ERR' }", "error-query is 'SYST:ERR'", "a question without a semicolon, or none",
        "write it like 'SYSTem:ERRor:NEXT?'")]
    [InlineData("{ error-query: 'A;B?' }", "error-query is 'A;B?'", "a question without a semicolon, or none",
        "write it like 'SYSTem:ERRor:NEXT?'")]
    [InlineData("{ echo: maybe }", "echo is 'maybe'", "true or false", "write it like true")]
    [InlineData("{ block-before: '#' }", "block-before is '#'", "1 to 32 printable characters without #",
        "write it like 'TRACE '")]
    [InlineData("{ ecko: true }", "'ecko' is no key of wire", "one of its keys", "did you mean echo?")]
    [InlineData("{ numbered: true, recovery: reopen }", "numbered is true where recovery is reopen",
        "an instrument that knows *ESE for both, or for neither", "remove one of the two")]
    public void What_it_cannot_be_is_refused_with_what_to_do(string wire, string found, string expected, string advice)
    {
        Problem problem = Assert.Single(Readers.Problems(Readers.Source("dialect.yaml", Text(wire))));
        Assert.Equal((found, expected, advice), (problem.Found, problem.Expected, problem.Advice));
        Assert.Equal(7, problem.Where.Line);
    }

    [Fact]
    public void Only_what_safety_reads_is_numbered()
    {
        string supply = File.ReadAllText(Repository.PathOf("sequences", "dialects", "generic-supply.yaml"))
            .With("commands:", "wire: { numbered: true }\ncommands:");
        Problem problem = Assert.Single(Readers.Problems(Readers.Source("dialect.yaml", supply)));
        Assert.Equal("numbered is true in a dialect of the role supply", problem.Found);
    }

    private static WireHabits Wire(string block)
    {
        Read<DialectFile> read = DialectReader.Read(Readers.Source("dialect.yaml", Text(block)));
        Assert.Empty(read.Problems);
        return read.Value!.Wire;
    }

    private static string Text(string block) => _voltmeter.With("wire: { numbered: true }", $"wire: {block}");
}
