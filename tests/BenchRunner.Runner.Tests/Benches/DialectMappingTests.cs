using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Benches;

/// <summary>Files and instruments list a role's operations apart; here they are held together.</summary>
public sealed partial class DialectMappingTests
{
    public static TheoryData<string> Roles => [.. RoleOperations.All.Keys];

    [Theory]
    [MemberData(nameof(Roles))]
    public async Task A_dialect_file_gives_exactly_the_commands_that_the_role_needs(string role)
    {
        // A role names every command that it misses before it opens any link.
        var missing = await Assert.ThrowsAsync<InstrumentException>(
            () => Connect(role, new Dictionary<string, string>()));
        string[] needed = Listed().Match(missing.Message).Groups[1].Value.Split(", ");

        Assert.Equal(
            RoleOperations.All[role].Where(operation => !operation.IsOptional)
                .Select(operation => operation.Name).Order(StringComparer.Ordinal),
            needed.Order(StringComparer.Ordinal));
    }

    [Fact]
    public void Name_identity_and_commands_are_taken_over()
    {
        var commands = new Dictionary<string, string> { ["measure-voltage"] = "READ?" };
        Dialect dialect =
            new DialectFile("plain", "voltmeter", ".*METER.*", commands, new SourceFile("dialect", "plain.yaml", []))
            .ToDialect();

        Assert.Equal(("plain", ".*METER.*"), (dialect.Name, dialect.Identity));
        Assert.Equal("READ?", dialect.Commands["measure-voltage"]);
    }

    private static async Task Connect(string role, IReadOnlyDictionary<string, string> commands)
    {
        Dialect dialect =
            new DialectFile("empty", role, null, commands, new SourceFile("dialect", "empty.yaml", [])).ToDialect();
        var at = new InstrumentConnection(
            LinkAddress.Parse("tcp 127.0.0.1:1"), dialect, new SessionOptions(), TimeProvider.System,
            new RecordingSink());
        CancellationToken cancel = TestContext.Current.CancellationToken;
        using IDisposable connected = role switch
        {
            "supply" => await ScpiSupply.Connect(at, cancel),
            "pulser" => await ScpiPulser.Connect(at, cancel),
            "scope" => await ScpiScope.Connect(at, cancel),
            "voltmeter" => await ScpiVoltmeter.Connect(at, cancel),
            "hotplate" => await ScpiHotplate.Connect(at, cancel),
            _ => await ScpiInterlock.Connect(at, cancel),
        };
    }

    [GeneratedRegex("no command for (.*); add")]
    private static partial Regex Listed();
}
