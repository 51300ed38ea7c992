using System.Globalization;
using System.Net;
using System.Net.Sockets;

namespace EndToEnd;

/// <summary>A fake bench that is a process of its own, outlives every run, and says by itself how it stands: the tests' witness
/// beside the program's instruments.</summary>
internal sealed class WrittenBench : IDisposable
{
    private readonly Started _bench;

    private WrittenBench(Started bench, string file) => (_bench, File) = (bench, file);

    /// <summary>The bench file.</summary>
    public string File { get; }

    /// <summary>Its latch.</summary>
    public string Latch => Path.ChangeExtension(File, ".latch");

    /// <summary>What its guardian wrote down.</summary>
    public string GuardianLog => Path.ChangeExtension(File, ".guardian.jsonl");

    /// <summary>The arguments of a run on it.</summary>
    public string[] Run =>
    [
        "run", Workplace.Sequence, "--device", "W1200-0001", "--bench", File, "--operator", "op", "--armed-by", "op",
    ];

    public static async Task<WrittenBench> Start(Workplace place, params string[] options)
    {
        Directory.CreateDirectory(place.Path("benches"));
        if (!OperatingSystem.IsWindows())
        {
            // Guardian and run of another user leave latch and log here.
            System.IO.File.SetUnixFileMode(place.Path("benches"), (UnixFileMode)0b111_111_111);
        }

        string file = Path.Combine(place.Path("benches"), "lab.yaml");
        Started bench = place.Start(
            Workplace.FakeBench,
            ["serve", "--ends-with-input", "--say-states", "--device", "W1200-0001", "--pace", "5", "--write-bench", file,
                .. options]);
        await bench.Line(line => line == "ready");

        // A loaded machine must not trip a sound bench: what is tried here is what happens, not how soon.
        Workplace.MakePatient(file);
        return new WrittenBench(bench, file);
    }

    /// <summary>Waits until it says so, after the last time it was waited for.</summary>
    /// <param name="state">E.g. <c>outputs-off</c>.</param>
    /// <returns>When, s of the machine's monotonic clock.</returns>
    public async Task<double> Says(string state)
    {
        string line = await _bench.Next($"state {state} ");
        return double.Parse(line.Split(' ')[^1], CultureInfo.InvariantCulture);
    }

    /// <summary>Asks an instrument, on a connection that no run knows of.</summary>
    public async Task<string> Ask(string role, string question, params string[] settings)
    {
        string line = System.IO.File.ReadLines(File).Single(l => l.StartsWith($"  {role}:", StringComparison.Ordinal));
        using var client = new TcpClient();
        await client.ConnectAsync(
            IPEndPoint.Parse(line.Split('\'')[1].Split(' ')[1]), TestContext.Current.CancellationToken);
        using var reader = new StreamReader(client.GetStream());
        byte[] message = System.Text.Encoding.ASCII.GetBytes(string.Join('\n', [.. settings, question]) + "\n");
        await client.GetStream().WriteAsync(message, TestContext.Current.CancellationToken);
        return (await reader.ReadLineAsync(TestContext.Current.CancellationToken))!;
    }

    public void Dispose() => _bench.Dispose();
}
