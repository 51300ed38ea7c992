using System.CommandLine;
using System.Globalization;
using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;
using BenchRunner.Files;
using BenchRunner.Json;
using BenchRunner.Runner.Checks;

namespace BenchRunner.Commands;

/// <summary><c>bench check</c>: whether a run may begin on a bench, without setting anything.</summary>
internal static class BenchCheckCommand
{
    public static Command Build()
    {
        Option<string?> bench = CommonOptions.Bench();
        Option<bool> json = CommonOptions.Json();
        var command = new Command(
            "check",
            "looks at each instrument of a bench and sets nothing: link, identity, error queue, self-test, settings that "
                + "endanger a run, time of a question; exit 0 where the bench is fit, 5 where not, 4 where a latch "
                + "stands\n"
                + "Example: benchrunner bench check --bench lab-2.yaml") { bench, json };
        command.SetAction(async (parsed, stop) =>
        {
            BenchFiles files = Files(parsed.GetValue(bench));
            BenchCheckReport report = await BenchCheck.Run(files.Bench!, files.Dialects, TimeProvider.System, stop);
            if (parsed.GetValue(json))
            {
                Write(report);
            }
            else
            {
                Print(report);
            }

            return report.Latch is not null ? ExitCode.Safety : report.IsFit ? ExitCode.Done : ExitCode.Instrument;
        });
        return command;
    }

    private static BenchFiles Files(string? bench)
    {
        var problems = new List<Problem>();
        BenchFiles files = BenchFiles.Read(ExampleFiles.Find(bench ?? ExampleFiles.FakeBench), problems);
        return problems.Count == 0 ? files : throw new InputException(string.Join(Environment.NewLine, problems));
    }

    private static void Print(BenchCheckReport report)
    {
        foreach (InstrumentCheck instrument in report.Instruments)
        {
            System.Console.WriteLine($"{instrument.Role} at {instrument.Link}: {instrument.Identity ?? "not reached"}");
            if (double.IsFinite(instrument.LatencyMedian))
            {
                System.Console.WriteLine(string.Create(
                    CultureInfo.InvariantCulture,
                    $"  a question takes {instrument.LatencyMedian * 1e3:0.00} ms, at most {instrument.LatencyMost * 1e3:0.00} ms; "
                        + $"self-test {SelfTest(instrument)}"));
            }

            if (instrument.Settings.Count > 0)
            {
                System.Console.WriteLine(
                    $"  {string.Join(", ", instrument.Settings.Select(setting => $"{setting.Key} {setting.Value}"))}");
            }

            foreach (string error in instrument.Errors)
            {
                System.Console.WriteLine($"  error queue: {error}");
            }

            foreach (CheckFinding finding in instrument.Findings)
            {
                System.Console.WriteLine($"  {(finding.MakesUnfit ? "UNFIT" : "note")}: {finding.Message}");
            }
        }

        if (report.Latch is { } said)
        {
            System.Console.WriteLine($"A LATCH STANDS: {said}");
        }

        System.Console.WriteLine($"{report.Bench}: {(report.IsFit ? "fit" : "NOT FIT")}");
    }

    private static string SelfTest(InstrumentCheck instrument) => instrument.SelfTest switch
    {
        null => "not asked",
        0 => "passed",
        _ => "FAILED",
    };

    private static void Write(BenchCheckReport report) => JsonOutput.Write(new JsonObject
    {
        ["bench"] = report.Bench,
        ["fit"] = report.IsFit,
        ["latch"] = report.Latch,
        ["instruments"] = JsonOutput.Array(report.Instruments, instrument => new JsonObject
        {
            ["role"] = instrument.Role,
            ["link"] = instrument.Link,
            ["identity"] = instrument.Identity,
            ["errors"] = JsonOutput.Array(instrument.Errors, error => JsonValue.Create(error)),
            ["self_test"] = instrument.SelfTest,
            ["latency"] = new JsonObject
            {
                ["p50"] = JsonOutput.Number(instrument.LatencyMedian),
                ["max"] = JsonOutput.Number(instrument.LatencyMost),
            },
            ["settings"] = new JsonObject(instrument.Settings.Select(
                setting => KeyValuePair.Create<string, JsonNode?>(setting.Key, JsonValue.Create(setting.Value)))),
            ["findings"] = JsonOutput.Array(instrument.Findings, finding => new JsonObject
            {
                ["unfit"] = finding.MakesUnfit,
                ["message"] = finding.Message,
            }),
        }),
    });
}
