using System.CommandLine;
using BenchRunner.Console;
using BenchRunner.Files;
using BenchRunner.Json;

namespace BenchRunner.Commands;

/// <summary><c>plan</c>: what would be done, and what refuses and why. Touches no instrument.</summary>
internal static class PlanCommand
{
    public static Command Build()
    {
        var sequence = new Argument<string>("sequence") { Description = "the sequence file" };
        Option<string?> bench = CommonOptions.Bench();
        Option<bool> json = CommonOptions.Json();
        var command = new Command(
            "plan",
            "reads and checks all files, prints what would be done and what refuses and why\n"
                + "Example: benchrunner plan sequences/winch-drive-incoming.yaml") { sequence, bench, json };
        command.SetAction(parsed =>
        {
            Job job = Job.Read(parsed.GetRequiredValue(sequence), parsed.GetValue(bench));
            if (parsed.GetValue(json))
            {
                PlanJson.Write(job.Sequence, job.Planned);
            }
            else
            {
                foreach (string line in PlanText.Lines(job.Planned))
                {
                    System.Console.WriteLine(line);
                }
            }

            return job.Planned.Refusals.Count == 0 ? ExitCode.Done : ExitCode.WrongInput;
        });
        return command;
    }
}
