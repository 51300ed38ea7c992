using BenchRunner.Acceptance.Benches;
using BenchRunner.Commands;
using BenchRunner.Json;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Console;

/// <summary>The last words of a session.</summary>
internal static class RunReport
{
    /// <summary>Writes what broke the session off, who got no run, and how it ended.</summary>
    /// <returns>The exit code.</returns>
    public static int Write(
        RunSummary summary, Bench bench, string evidence, Screen screen, bool json, CancellationToken stop)
    {
        int code = RunExit.Of(summary, stop);
        if (summary.BrokenOff is { } broken)
        {
            screen.Line(screen.Palette.Bad(Screen.Printable(Ending.Explain(broken, stop).Message)));
        }

        foreach (string device in summary.NotRun)
        {
            screen.Line(screen.Palette.Bad($"{device}: got no run"));
        }

        screen.Line($"{Simulated(summary.Simulated)}{RunExit.Words(code)}");
        if (json)
        {
            RunJson.Write(summary, bench, evidence, code);
        }

        return code;
    }

    /// <summary>What a line of a simulated bench begins with.</summary>
    public static string Simulated(bool simulated) => simulated ? "SIMULATED. " : "";
}
