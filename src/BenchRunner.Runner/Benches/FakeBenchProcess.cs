using System.Diagnostics;
using System.Globalization;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Benches;

/// <summary>The fake bench that <c>run</c> starts as a child: its instruments' links, and the hands that exchange
/// devices.</summary>
/// <remarks>It ends when its standard input has closed, its bank is down and nobody is connected any more: the guardian of a
/// run that died still needs it. After a minute it ends in any case.</remarks>
public sealed class FakeBenchProcess : IHands, IAsyncDisposable
{
    private static readonly TimeSpan StartLimit = TimeSpan.FromSeconds(15);
    private static readonly TimeSpan EndLimit = TimeSpan.FromSeconds(2);
    private readonly Process _process;

    private FakeBenchProcess(Process process, IReadOnlyDictionary<string, string> links)
    {
        _process = process;
        Links = links;
    }

    /// <summary>Role to link, e.g. <c>supply</c> to <c>tcp 127.0.0.1 41001</c>.</summary>
    public IReadOnlyDictionary<string, string> Links { get; }

    /// <summary>Starts the child and waits until every instrument listens.</summary>
    /// <param name="bench">The bench; it has a <c>fake:</c> block.</param>
    /// <param name="device">Serial of the first device in the fixture.</param>
    /// <param name="companion">Serial of the companion in the other place; null: none.</param>
    /// <param name="time">The clock of the start's deadline.</param>
    /// <param name="cancel">Ends the waiting and the child.</param>
    /// <exception cref="BenchException">The program is missing, or ended or kept silent before it was
    /// ready.</exception>
    public static async Task<FakeBenchProcess> Start(
        Bench bench, string device, string? companion, TimeProvider time, CancellationToken cancel)
    {
        Process process = Launch(Arguments(bench, device, companion));
        try
        {
            using var limit = new CancellationTokenSource(StartLimit, time);
            using var both = CancellationTokenSource.CreateLinkedTokenSource(limit.Token, cancel);
            return new FakeBenchProcess(process, await ReadLinks(process, both.Token));
        }
        catch (Exception failure)
        {
            process.Kill();
            process.Dispose();
            cancel.ThrowIfCancellationRequested();
            throw failure is OperationCanceledException
                ? new BenchException($"the fake bench was not ready within {StartLimit.TotalSeconds:0} s", failure)
                : failure;
        }
    }

    /// <inheritdoc/>
    public async Task Do(string hand, CancellationToken cancel)
    {
        try
        {
            await _process.StandardInput.WriteLineAsync(hand.AsMemory(), cancel);
            await _process.StandardInput.FlushAsync(cancel);
        }
        catch (IOException failure)
        {
            throw new BenchException("the fake bench has ended by itself", failure);
        }
    }

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        try
        {
            _process.StandardInput.Close();
        }
        catch (IOException)
        {
            // It has ended by itself, and what was written last found no reader: there is nothing left to end.
        }

        // One whose bank is not down stays for the guardian, and ends by itself.
        using var patience = new CancellationTokenSource(EndLimit, TimeProvider.System);
        try
        {
            await _process.WaitForExitAsync(patience.Token);
        }
        catch (OperationCanceledException)
        {
            // It holds up no run's end.
        }

        _process.Dispose();
    }

    private static List<string> Arguments(Bench bench, string device, string? companion)
    {
        FakeSettings fake = bench.Fake
            ?? throw new ArgumentException("The bench has no fake: block.", nameof(bench));
        List<string> arguments =
        [
            "serve", "--ends-with-input",
            "--device", device,
            "--seed", fake.Seed.ToString(CultureInfo.InvariantCulture),
            "--pace", fake.Pace.ToString(CultureInfo.InvariantCulture),
            "--channels", string.Join(',', bench.Channels.OrderBy(c => c.Input).Select(c => c.Channel.Name())),
        ];
        if (companion is not null)
        {
            arguments.AddRange(["--companion", companion]);
        }

        if (!bench.LoadToPositive)
        {
            arguments.AddRange(["--load", "negative"]);
        }

        if (bench.Roles.ContainsKey("hotplate"))
        {
            arguments.AddRange(
                ["--hotplate", "--ambient", bench.Ambient.ToString(CultureInfo.InvariantCulture)]);
        }

        foreach (string fault in fake.Faults)
        {
            arguments.AddRange(["--fault", fault]);
        }

        return arguments;
    }

    private static Process Launch(IEnumerable<string> arguments)
    {
        string folder = Path.Combine(AppContext.BaseDirectory, "fakebench");
        string program = Path.Combine(folder, OperatingSystem.IsWindows() ? "FakeBench.exe" : "FakeBench");
        if (!File.Exists(program))
        {
            throw new BenchException($"the fake bench is missing at {program}; build the whole solution");
        }

        var start = new ProcessStartInfo(program)
        {
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            UseShellExecute = false,
        };
        foreach (string argument in arguments)
        {
            start.ArgumentList.Add(argument);
        }

        return Process.Start(start) ?? throw new BenchException($"{program} did not start");
    }

    private static async Task<IReadOnlyDictionary<string, string>> ReadLinks(Process process, CancellationToken cancel)
    {
        var links = new Dictionary<string, string>();
        while (await process.StandardOutput.ReadLineAsync(cancel) is { } line)
        {
            if (line == "ready")
            {
                return links;
            }

            string[] words = line.Split(' ', 2);
            if (words.Length == 2)
            {
                links[words[0]] = words[1];
            }
        }

        throw new BenchException("the fake bench ended before it was ready; its own message stands above");
    }
}
