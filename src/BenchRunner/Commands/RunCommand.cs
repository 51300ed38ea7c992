using System.CommandLine;
using BenchRunner.Console;
using BenchRunner.Files;
using BenchRunner.Runner.Guarding;
using BenchRunner.Runner.Sessions;
using BenchRunner.Runner.Sinks;

namespace BenchRunner.Commands;

/// <summary><c>run</c>: the main job.</summary>
internal static class RunCommand
{
    public static Command Build()
    {
        var options = new RunOptions();
        var command = new Command(
            "run",
            "takes devices through a sequence, stores the evidence, decides.\n"
                + "DANGER: on a real bench this charges a capacitor to lethal voltage. Enclosure closed, nobody "
                + "inside, eye "
                + "protection, not alone, hardware emergency stop in reach; this program is not a safety device.\n"
                + "Example: benchrunner run sequences/winch-drive-incoming.yaml --device W1200-0001");
        options.AddTo(command);
        command.SetAction((parsed, stop) => Run(options.From(parsed), stop));
        return command;
    }

    private static async Task<int> Run(RunArguments arguments, CancellationToken stop)
    {
        Job job = Job.Read(arguments.Sequence, arguments.Bench);
        arguments.Check(job);
        await using Screen screen = Screen.Standard(error: arguments.Json);
        await using var terminal = new OperatorTerminal(screen, TimeProvider.System);
        var serials = new Serials(
            arguments.Devices, job.Sequence, () => Terminal.IsStandardInput
                ? new TerminalSerials(terminal, job.Sequence, screen.Line)
                : new StreamSerials(System.Console.OpenStandardInput(), job.Sequence, screen.Line));
        RunRequest request = arguments.Request(job);
        EvidenceFiles.RequireSpace(request.EvidencePath, request.Plan.Bytes);
        screen.Line(RunReport.Simulated(job.Bench.Fake is not null)
            + $"{job.Sequence.Name} revision {job.Sequence.Revision}, bench {job.Bench.Name}, evidence in "
            + request.EvidencePath);
        var session = new RunSession(
            request, new SinkSet([new ProgressLog(screen)]),
            new BenchOperator(screen, terminal, job.Sequence, arguments.ArmedBy), TimeProvider.System)
        {
            Guardian = (bench, log, time) => GuardianProcess.Start(Program.Path, bench, log, time),
        };
        RunSummary summary = await session.Run(serials, stop);
        return RunReport.Write(summary, job.Bench, request.EvidencePath, screen, arguments.Json, stop);
    }
}
