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
    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("benchrunner-safety-");
    private readonly Dictionary<string, Relay> _relays = [];
    private readonly BlockingCollection<string> _states = [];
    private readonly Process _bench;
    private readonly Process _run;

    private Trial(int seed)
    {
        string written = Path.Combine(_folder.FullName, "written.yaml");
        _bench = Start(
            Path.Combine(Built("FakeBench"), "FakeBench"),
            "serve", "--ends-with-input", "--say-states", "--interlock", "tcp", "--seed",
            seed.ToString(CultureInfo.InvariantCulture), "--write-bench", written);
        Until(_bench, line => line == "ready");
        Follow(_bench, Keep);
        string file = Path.Combine(_folder.FullName, "bench.yaml");
        File.WriteAllLines(file, File.ReadLines(written).Select(Relayed));
        _run = Start(
            Path.Combine(Built("BenchRunner"), "benchrunner"),
            "run", "sequences/winch-drive-incoming.yaml", "--device", "W1200-0001", "--bench", file, "--operator", "op",
            "--armed-by", "op", "--evidence", Path.Combine(_folder.FullName, "evidence.db"));
        Until(_run, line => line.Contains("rated capture 1", StringComparison.Ordinal));
        Follow(_run, _ => { });
        Guardian = GuardianOf(_run.Id);
    }

    /// <summary>Number of the run's process.</summary>
    public int Runner => _run.Id;

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
        _bench.StandardInput.WriteLine(what);
        _bench.StandardInput.Flush();
    }

    /// <summary>An instrument answers nothing more.</summary>
    public void Silence(string role) => _relays[role].Silence();

    /// <summary>All connections to an instrument are cut; new ones are taken.</summary>
    public void Cut(string role) => _relays[role].Cut();

    public void Dispose()
    {
        Signal(Guardian, 9);
        foreach (Process process in (Process[])[_run, _bench])
        {
            if (!process.HasExited)
            {
                process.Kill();
            }

            process.Dispose();
        }

        foreach (Relay relay in _relays.Values)
        {
            relay.Dispose();
        }

        _folder.Delete(recursive: true);
    }

    private static string Built(string project)
    {
        // artifacts/bin/benchmarks/release/ beside artifacts/bin/PROJECT/release/
        DirectoryInfo here = new(AppContext.BaseDirectory.TrimEnd('/'));
        return Path.Combine(here.Parent!.Parent!.FullName, project, here.Name);
    }

    private static Process Start(string program, params string[] arguments)
    {
        var start = new ProcessStartInfo(program)
        {
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            RedirectStandardError = true,
            UseShellExecute = false,
            WorkingDirectory = Built("BenchRunner"),
        };
        foreach (string argument in arguments)
        {
            start.ArgumentList.Add(argument);
        }

        Process process = Process.Start(start)!;
        process.ErrorDataReceived += (_, _) => { };
        process.BeginErrorReadLine();
        return process;
    }

    private static void Until(Process process, Func<string, bool> isWanted)
    {
        while (process.StandardOutput.ReadLine() is { } line)
        {
            if (isWanted(line))
            {
                return;
            }
        }

        throw new InvalidOperationException($"{process.StartInfo.FileName} ended before it was where a trial begins.");
    }

    /// <summary>Takes what a process says from here on; it must not wait for a reader.</summary>
    private static void Follow(Process process, Action<string> take)
    {
        StreamReader output = process.StandardOutput;
        var reader = new Thread(() =>
        {
            try
            {
                while (output.ReadLine() is { } line)
                {
                    take(line);
                }
            }
            catch (Exception over) when (over is IOException or ObjectDisposedException or InvalidOperationException)
            {
                // The trial is over.
            }
        })
        { IsBackground = true, Name = "trial" };
        reader.Start();
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

    private string Relayed(string line)
    {
        const string mark = "'tcp 127.0.0.1:";
        int at = line.IndexOf(mark, StringComparison.Ordinal);
        if (at < 0)
        {
            return line;
        }

        int start = at + mark.Length;
        int end = line.IndexOf('\'', start);
        var relay = new Relay(int.Parse(line[start..end], CultureInfo.InvariantCulture));
        _relays[line.Trim().Split(':')[0]] = relay;
        return line[..start] + relay.Port.ToString(CultureInfo.InvariantCulture) + line[end..];
    }

    [LibraryImport("libc", EntryPoint = "kill")]
    private static partial int Kill(int process, int signal);
}
