using System.Diagnostics;

namespace BenchRunner.Safety.Tests.Benches;

/// <summary>The built fake bench as a process of its own: its links, and the operator's hands.</summary>
internal sealed class FakeProgram : IDisposable
{
    private static readonly TimeSpan StartLimit = TimeSpan.FromSeconds(30);
    private readonly Process _process;

    private FakeProgram(Process process, Dictionary<string, string> links) => (_process, Links) = (process, links);

    /// <summary>Role to link.</summary>
    public IReadOnlyDictionary<string, string> Links { get; }

    public static async Task<FakeProgram> Start(params string[] faults)
    {
        string name = OperatingSystem.IsWindows() ? "FakeBench.exe" : "FakeBench";
        string configuration =
            AppContext.BaseDirectory.Contains("release", StringComparison.OrdinalIgnoreCase) ? "release" : "debug";
        var start = new ProcessStartInfo(Repository.File("artifacts", "bin", "FakeBench", configuration, name))
        {
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            UseShellExecute = false,
        };
        foreach (string argument in (string[])
        [
            "serve", "--ends-with-input", "--pace", "5", "--interlock", "tcp",
            .. faults.SelectMany(fault => (string[])["--fault", fault]),
        ])
        {
            start.ArgumentList.Add(argument);
        }

        Process process = Process.Start(start)!;
        try
        {
            using var limit = new CancellationTokenSource(StartLimit);
            var links = new Dictionary<string, string>();
            while (await process.StandardOutput.ReadLineAsync(limit.Token) is { } line && line != "ready")
            {
                string[] words = line.Split(' ', 2);
                links[words[0]] = words[1];
            }

            return new FakeProgram(process, links);
        }
        catch
        {
            process.Kill();
            process.Dispose();
            throw;
        }
    }

    /// <summary>Does one thing at the fixture.</summary>
    public void Do(string hand)
    {
        _process.StandardInput.WriteLine(hand);
        _process.StandardInput.Flush();
    }

    /// <summary>Every instrument falls silent at once, as when the power of the rack goes.</summary>
    public void Kill() => _process.Kill();

    public void Dispose()
    {
        if (!_process.HasExited)
        {
            _process.Kill();
        }

        _process.Dispose();
    }
}
