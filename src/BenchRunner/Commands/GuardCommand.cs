using System.CommandLine;
using BenchRunner.Guards;

namespace BenchRunner.Commands;

/// <summary><c>guard</c>: the guardian of a run.</summary>
internal static class GuardCommand
{
    public static Command Build()
    {
        var bench = new Option<FileInfo>("--bench") { Description = "the bench file", Required = true };
        var runner = new Option<int?>("--runner")
        {
            Description = "number of the process that it ends before it acts; without it none is ended",
        };
        var log = new Option<FileInfo?>("--log")
        {
            Description = "where it writes what it did, if it had to act (beside the bench file)",
        };
        var command = new Command(
            "guard",
            "the guardian; 'run' starts one by itself, before anything is energised. It listens at standard input to the "
                + "run's heartbeat. Where that ends, is no heartbeat or stays away, it ends the run first, then switches "
                + "off, engages the bleeder, proves the bus down and writes down what it did. It can switch nothing on, and "
                + "ignores interrupts: it leaves when its input ends and its work is done.\n"
                + "By hand it makes a bench safe that a dead computer left behind: after 'begin', the end of its input is a "
                + "dead run.\n"
                + "Example: echo begin | benchrunner guard --bench lab-2.yaml")
        {
            bench, runner, log,
        };
        command.SetAction((parsed, _) => new GuardedRun(
            parsed.GetRequiredValue(bench).FullName, parsed.GetValue(log)?.FullName, parsed.GetValue(runner)).Run());
        return command;
    }
}
