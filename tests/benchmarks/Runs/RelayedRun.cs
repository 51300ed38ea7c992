using System.Diagnostics;
using System.Globalization;

namespace BenchRunner.Benchmarks;

/// <summary>The real program on a fake bench as slow as a lab's, each a process of its own, with a relay before every
/// instrument.</summary>
internal sealed class RelayedRun : IDisposable
{
    // The bounds of the shipped fake benches.
    private const string Patient = "safety: { reply-within: 1500 ms, guardian-silence: 2 s }";

    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("benchrunner-benchmark-");
    private readonly Dictionary<string, Relay> _relays = [];

    /// <summary>Starts both; the run goes on by itself.</summary>
    /// <param name="seed">Seed of the fake bench.</param>
    /// <param name="said">Takes what the bench says after it is ready; from a thread of its own.</param>
    /// <param name="isPatient">Whether a loaded machine must not trip the run, since it is not safety that is timed.</param>
    /// <param name="heard">Takes what passes a relay: role, whether the instrument said it, the bytes; from a thread of
    /// each link.</param>
    public RelayedRun(int seed, Action<string> said, bool isPatient = false, Action<string, bool, byte[]>? heard = null)
    {
        string written = Path.Combine(_folder.FullName, "written.yaml");
        Bench = Start(
            Path.Combine(Built("FakeBench"), "FakeBench"),
            "serve", "--ends-with-input", "--say-states", "--interlock", "tcp", "--seed",
            seed.ToString(CultureInfo.InvariantCulture), "--write-bench", written);
        Until(Bench, line => line == "ready");
        Follow(Bench, said);
        string file = Path.Combine(_folder.FullName, "bench.yaml");
        IEnumerable<string> lines = File.ReadLines(written).Select(line => Relayed(line, heard));
        File.WriteAllLines(file, isPatient ? lines.Append(Patient) : lines);
        Run = Start(
            Path.Combine(Built("BenchRunner"), "benchrunner"),
            "run", "sequences/winch-drive-incoming.yaml", "--device", "W1200-0001", "--bench", file, "--operator", "op",
            "--armed-by", "op", "--evidence", Path.Combine(_folder.FullName, "evidence.db"));
    }

    /// <summary>The bench; its standard input is the operator's hands.</summary>
    public Process Bench { get; }

    /// <summary>The run.</summary>
    public Process Run { get; }

    /// <summary>The link of a role.</summary>
    public Relay this[string role] => _relays[role];

    /// <summary>Waits until the run says a line, and drops what it says from then on.</summary>
    public void Until(Func<string, bool> isWanted)
    {
        Until(Run, isWanted);
        Follow(Run, _ => { });
    }

    /// <summary>Waits until the run has ended.</summary>
    /// <returns>What ended it before its device was decided, in its own words; null: nothing did.</returns>
    public string? UntilEnd()
    {
        string last = "";
        while (Run.StandardOutput.ReadLine() is { } line)
        {
            last = line.Length > 0 ? line : last;
        }

        Run.WaitForExit();
        return Run.ExitCode == 0 ? null : string.Create(
            CultureInfo.InvariantCulture, $"the run ended with exit code {Run.ExitCode}: {last}");
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        foreach (Process process in (Process[])[Run, Bench])
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

    private string Relayed(string line, Action<string, bool, byte[]>? heard)
    {
        const string mark = "'tcp 127.0.0.1:";
        int at = line.IndexOf(mark, StringComparison.Ordinal);
        if (at < 0)
        {
            return line;
        }

        int start = at + mark.Length;
        int end = line.IndexOf('\'', start);
        string role = line.Trim().Split(':')[0];
        var relay = new Relay(
            int.Parse(line[start..end], CultureInfo.InvariantCulture),
            heard is null ? null : (isAnswer, bytes) => heard(role, isAnswer, bytes));
        _relays[role] = relay;
        return line[..start] + relay.Port.ToString(CultureInfo.InvariantCulture) + line[end..];
    }
}
