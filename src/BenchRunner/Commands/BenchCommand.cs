using System.CommandLine;
using BenchRunner.Safety.Latches;

namespace BenchRunner.Commands;

/// <summary><c>bench</c>: what concerns the bench itself; <c>bench clear</c>: a person takes its latch off.</summary>
internal static class BenchCommand
{
    public static Command Build()
    {
        var bench = new Option<FileInfo>("--bench") { Description = "the bench file", Required = true };
        var by = new Option<string>("--by") { Description = "who clears it", Required = true };
        var because = new Option<string>("--because")
        {
            Description = "what was found and put right",
            Required = true,
        };
        var clear = new Command(
            "clear",
            "takes the latch of a trip off a bench, with name and reason; only after the cause was found and put "
                + "right.\n"
                + "Example: benchrunner bench clear --bench lab-2.yaml --by 'A. Person' --because 'door switch "
                + "replaced'")
        {
            bench, by, because,
        };
        clear.SetAction(parsed => Clear(
            parsed.GetRequiredValue(bench), parsed.GetRequiredValue(by), parsed.GetRequiredValue(because)));
        return new Command("bench", "what concerns the bench itself") { clear, BenchCheckCommand.Build() };
    }

    private static int Clear(FileInfo bench, string by, string because)
    {
        if (!bench.Exists)
        {
            throw new InputException($"{bench}: no such bench file; name the file whose latch stands");
        }

        if (string.IsNullOrWhiteSpace(by) || string.IsNullOrWhiteSpace(because))
        {
            throw new InputException("--by and --because must say who clears the latch and why; neither may be empty");
        }

        string? said = new LatchFile(bench.FullName).Clear(TimeProvider.System.GetUtcNow(), by, because);
        System.Console.WriteLine(said is null ? $"{bench}: no latch stands" : $"{bench}: cleared; it said: {said}");
        return ExitCode.Done;
    }
}
