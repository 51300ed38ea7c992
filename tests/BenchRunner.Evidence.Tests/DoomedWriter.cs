using System.Diagnostics;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests;

/// <summary>A process of its own that stores captures and announces each on a line, until it is killed.</summary>
internal static class DoomedWriter
{
    public const string Argument = "write-until-killed";

    private const int MostCaptures = 10_000;

    /// <summary>The captures' codes by their number: the parent forms them again.</summary>
    public static int Seed(int number) => 1000 + number;

    public static int Write(string file)
    {
        using EvidenceStore store = EvidenceStore.Open(file, TimeProvider.System);
        RunWriter run = store.BeginRun(Samples.Header());
        Console.Out.WriteLine($"run {run.Run}");
        for (int number = 1; number <= MostCaptures; number++)
        {
            run.AddCapture(Samples.Capture(number, seed: Seed(number), count: 20_000));
            Console.Out.WriteLine($"capture {number}");
            Console.Out.Flush();
        }

        return 0;
    }

    public static Process Start(string file)
    {
        ProcessStartInfo start = new(Environment.ProcessPath!) { RedirectStandardOutput = true };
        if (Path.GetFileNameWithoutExtension(Environment.ProcessPath) == "dotnet")
        {
            start.ArgumentList.Add(typeof(DoomedWriter).Assembly.Location);
        }

        start.ArgumentList.Add(Argument);
        start.ArgumentList.Add(file);
        return Process.Start(start)!;
    }
}
