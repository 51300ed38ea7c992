using System.Text.RegularExpressions;
using FakeBench.Instruments;

namespace FakeBench.Tests.Instruments;

/// <summary>Every command of the shipped generic dialects is one that the fake instruments know.</summary>
public sealed partial class DialectTests
{
    // Values that are in range wherever {value} stands.
    private static readonly Dictionary<string, string> Values = new()
    {
        ["set-points"] = "2000",
        ["set-interval"] = "1E-8",
        ["set-first-width"] = "5E-6",
        ["set-gap"] = "6E-6",
        ["set-second-width"] = "3E-6",
        ["set-pretrigger"] = "1E-6",
        ["set-gate-off"] = "-4",
        ["set-current"] = "0.5",
    };

    [Theory]
    [InlineData("supply")]
    [InlineData("pulser")]
    [InlineData("scope")]
    [InlineData("voltmeter")]
    [InlineData("interlock")]
    [InlineData("hotplate")]
    public void A_generic_dialect_is_understood(string role)
    {
        TestBench bench = TestBench.Hot();
        bench.Configure();
        bench.Fire();
        Instrument instrument = bench.Panels.All.Single(i => i.Role == role);
        MatchCollection commands = CommandLine().Matches(File.ReadAllText(Dialect(role)));
        Assert.NotEmpty(commands);
        foreach (Match command in commands)
        {
            string name = command.Groups[1].Value;
            string message = command.Groups[2].Value
                .Replace("{value}", Values.GetValueOrDefault(name, "10"), StringComparison.Ordinal)
                .Replace("{channel}", "2", StringComparison.Ordinal);
            if (name == "arm" && role == "pulser")
            {
                TestBench.Say(instrument, "OUTP 1"); // the line before switched it off
            }

            if (name == "trigger" && role == "scope")
            {
                TestBench.Say(instrument, "ABOR;:INIT"); // it triggers an armed scope
            }

            bench.Wait(1e-3); // what was triggered is complete
            string reply = TestBench.Ask(instrument, message);
            Assert.Equal(message.Contains('?', StringComparison.Ordinal), reply.Length > 0);
            Assert.Equal("0,\"No error\"", TestBench.Ask(instrument, "SYST:ERR?"));
            if (name == "arm" && role == "scope")
            {
                TestBench.Say(instrument, "ABORt"); // the record may be read in a stopped state only
            }
        }
    }

    private static string Dialect(string role)
    {
        string? folder = AppContext.BaseDirectory;
        while (folder is not null && !Directory.Exists(Path.Combine(folder, "sequences", "dialects")))
        {
            folder = Path.GetDirectoryName(folder);
        }

        return Path.Combine(folder ?? "", "sequences", "dialects", $"generic-{role}.yaml");
    }

    [GeneratedRegex("^  ([a-z-]+): '([^']+)'", RegexOptions.Multiline)]
    private static partial Regex CommandLine();
}
