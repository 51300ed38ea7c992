using System.Collections.Concurrent;
using System.Diagnostics;
using System.Globalization;
using System.Runtime.InteropServices;

namespace BenchRunner.Benchmarks;

/// <summary>One run on a fake bench behind relays, up to a failure and beyond.</summary>
internal sealed partial class Trial : IDisposable
{
    private const double PointVoltage = 600;
    private static readonly TimeSpan Patience = TimeSpan.FromSeconds(60);
    private readonly BlockingCollection<string> _states = [];
    private readonly RelayedRun _running;

    private Trial(int seed)
    {
        _running = new RelayedRun(seed, Keep);
        _running.Until(line => line.Contains("rated capture 1", StringComparison.Ordinal));
        Guardian = GuardianOf(Runner);
    }

    /// <summary>Number of the run's process.</summary>
    public int Runner => _running.Run.Id;

    /// <summary>Number of its guardian's.</summary>
    public int Guardian { get; }

    /// <summary>Takes a bench to 600 V, lets something fail, and times what follows.</summary>
    public static TrialResult Take(Failure failure, int seed)
    {
        using var trial = new Trial(seed);
        while (trial._states.TryTake(out _))
        {
            // What was said on the way up.
        }

        double failed = Stopwatch.GetTimestamp() / (double)Stopwatch.Frequency;
        failure.Do(trial);
        double? off = trial.Says("outputs-off", failed);
        double? down = trial.Says("bus-down", failed);
        const double bleeder = 25e3;
        const double bank = 50e-6;
        return new TrialResult(failure.Name, off - failed, down - failed, bleeder * bank * Math.Log(PointVoltage / 60));
    }

    /// <summary>Sends a signal.</summary>
    public static void Signal(int process, int signal) => _ = Kill(process, signal);

    /// <summary>Lets the operator's hands do something.</summary>
    public void Hand(string what)
    {
        _running.Bench.StandardInput.WriteLine(what);
        _running.Bench.StandardInput.Flush();
    }

    /// <summary>An instrument answers nothing more.</summary>
    public void Silence(string role) => _running[role].Silence();

    /// <summary>All connections to an instrument are cut; new ones are taken.</summary>
    public void Cut(string role) => _running[role].Cut();

    public void Dispose()
    {
        Signal(Guardian, 9);
        _running.Dispose();
    }

    private static int GuardianOf(int runner) => Directory.GetDirectories("/proc")
        .Select(folder => int.TryParse(Path.GetFileName(folder), out int number) ? number : 0)
        .First(number => number > 0 && IsGuardian(number, runner));

    private static bool IsGuardian(int number, int runner)
    {
        try
        {
            return File.ReadAllText($"/proc/{number}/cmdline").Contains("\0guard\0", StringComparison.Ordinal)
                && File.ReadLines($"/proc/{number}/status").Contains($"PPid:\t{runner}");
        }
        catch (IOException)
        {
            return false;
        }
    }

    private void Keep(string line)
    {
        if (line.StartsWith("state ", StringComparison.Ordinal))
        {
            _states.Add(line);
        }
    }

    private double? Says(string state, double after)
    {
        using var patience = new CancellationTokenSource(Patience);
        try
        {
            foreach (string line in _states.GetConsumingEnumerable(patience.Token))
            {
                string[] words = line.Split(' ');
                double at = double.Parse(words[2], CultureInfo.InvariantCulture);
                if (words[1] == state && at >= after)
                {
                    return at;
                }
            }
        }
        catch (OperationCanceledException)
        {
            // It never came.
        }

        return null;
    }

    [LibraryImport("libc", EntryPoint = "kill")]
    private static partial int Kill(int process, int signal);
}
