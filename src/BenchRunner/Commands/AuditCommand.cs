using System.CommandLine;
using System.Text.Json.Nodes;
using BenchRunner.Evidence.Audits;
using BenchRunner.Files;
using BenchRunner.Json;

namespace BenchRunner.Commands;

/// <summary><c>audit</c>: whether anything stored was altered, lost or half-written.</summary>
internal static class AuditCommand
{
    public static Command Build()
    {
        Option<string?> evidence = CommonOptions.Evidence();
        var since = new Option<string?>("--since")
        {
            Description = "a seal kept outside the file, which must be in its chain",
        };
        Option<bool> json = CommonOptions.Json();
        var command = new Command(
            "audit",
            "recomputes every seal and hash of the evidence; exit 0 only if nothing was altered, lost or half-written\n"
                + "Example: benchrunner audit --evidence bench-evidence.db") { evidence, since, json };
        command.SetAction((parsed, stop) =>
        {
            string file = EvidenceFiles.ToRead(parsed.GetValue(evidence));
            AuditReport report = EvidenceAudit.Verify(file, parsed.GetValue(since), stop);
            if (parsed.GetValue(json))
            {
                Write(report);
            }
            else
            {
                Print(file, report);
            }

            return Task.FromResult(report.Ok ? ExitCode.Done : ExitCode.Evidence);
        });
        return command;
    }

    private static void Print(string file, AuditReport report)
    {
        foreach (AuditProblem problem in report.Problems)
        {
            System.Console.WriteLine($"{problem.Run ?? file}: {problem.What}: {problem.Message}");
        }

        System.Console.WriteLine(
            $"{file}: {report.Runs} runs, {report.Captures} captures, {(report.Ok ? "as sealed" : "NOT as sealed")}");
    }

    private static void Write(AuditReport report) => JsonOutput.Write(new JsonObject
    {
        ["ok"] = report.Ok,
        ["runs"] = report.Runs,
        ["captures"] = report.Captures,
        ["problems"] = JsonOutput.Array(report.Problems, problem => new JsonObject
        {
            ["run"] = problem.Run,
            ["what"] = problem.What,
            ["message"] = problem.Message,
        }),
    });
}
