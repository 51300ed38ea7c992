using System.Diagnostics;
using System.Globalization;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Runner.Benches;
using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Runner.Guarding;

/// <summary>The guardian as a process: <c>benchrunner guard</c>, at the other end of a pipe that has no name.</summary>
/// <remarks>
/// It answers each beat. Unanswered beats are few, so that a beat always finds room in the pipe and never waits; and a
/// guardian that does not answer in the time that it grants its runner is no guardian, stopped or dead.
/// </remarks>
public sealed class GuardianProcess : IRunGuardian
{
    private const int MostUnanswered = 64;
    private static readonly TimeSpan StartLimit = TimeSpan.FromSeconds(15);
    private static readonly TimeSpan EndLimit = TimeSpan.FromSeconds(2);
    private readonly Lock _gate = new();
    private readonly Process _process;
    private readonly Bench _bench;
    private readonly TimeProvider _time;
    private readonly Queue<long> _unanswered = new();
    private readonly Task _listening;
    private readonly TaskCompletionSource<string> _ready = new(TaskCreationOptions.RunContinuationsAsynchronously);
    private BusWitness? _witness;
    private Action<string>? _lost;
    private string? _whyLost;
    private bool _isReady;
    private bool _isDone;
    private long _sent;

    private GuardianProcess(Process process, Bench bench, TimeProvider time)
    {
        _process = process;
        _bench = bench;
        _time = time;
        _listening = Background.Start(Listen);
    }

    /// <inheritdoc/>
    public event Action<string>? Lost
    {
        add
        {
            string? already;
            lock (_gate)
            {
                _lost += value;
                already = _whyLost;
            }

            if (already is not null)
            {
                value?.Invoke(already);
            }
        }

        remove
        {
            lock (_gate)
            {
                _lost -= value;
            }
        }
    }

    /// <inheritdoc/>
    public bool IsAlive
    {
        get
        {
            lock (_gate)
            {
                return _isReady && _whyLost is null;
            }
        }
    }

    private TimeSpan Patience => TimeSpan.FromSeconds(_bench.Safety.GuardianSilence);

    /// <summary>Starts the process.</summary>
    /// <param name="program">The executable <c>benchrunner</c>.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="log">Where it writes down what it does.</param>
    /// <param name="time">The clock.</param>
    /// <exception cref="BenchException">It cannot be started.</exception>
    public static GuardianProcess Start(string program, Bench bench, string log, TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(bench);
        var start = new ProcessStartInfo(program)
        {
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            UseShellExecute = false,
        };
        string[] arguments =
        [
            "guard", "--bench", bench.Source.Path, "--log", log,
            "--runner", Environment.ProcessId.ToString(CultureInfo.InvariantCulture),
        ];
        foreach (string argument in arguments)
        {
            start.ArgumentList.Add(argument);
        }

        try
        {
            Process process = Process.Start(start) ?? throw new BenchException($"the guardian {program} did not start");
            return new GuardianProcess(process, bench, time);
        }
        catch (Exception failure) when (failure is System.ComponentModel.Win32Exception or IOException)
        {
            throw new BenchException(
                $"the guardian {program} cannot be started: {failure.Message}; nothing was energised", failure);
        }
    }

    /// <inheritdoc/>
    public async Task Begin(IReadOnlyDictionary<string, string>? links, CancellationToken cancel)
    {
        foreach ((string role, string link) in links ?? new Dictionary<string, string>())
        {
            Write($"link {role} {link}");
        }

        Write("begin");
        string read;
        try
        {
            read = await _ready.Task.WaitAsync(StartLimit, _time, cancel);
        }
        catch (TimeoutException late)
        {
            throw new BenchException(
                $"the guardian was not ready within {StartLimit.TotalSeconds:0} s; nothing was energised", late);
        }

        if (read != _bench.Source.Sha256)
        {
            throw new BenchException(
                $"{_bench.Source.Path} changed while the run began: the guardian read another bench; start again; nothing "
                    + "was energised");
        }

        lock (_gate)
        {
            _isReady = _whyLost is null;
        }
    }

    /// <inheritdoc/>
    public void Follow(BusWitness witness) => _witness = witness;

    /// <inheritdoc/>
    public void Beat(BeatKind kind) => Send(kind switch
    {
        BeatKind.Polled => HeardKind.Polled,
        BeatKind.MakingSafe => HeardKind.MakingSafe,
        BeatKind.Done => HeardKind.Done,
        _ => throw new UnreachableException(),
    });

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        bool leaves;
        lock (_gate)
        {
            // Before the first beat nothing can have been energised: no permit is granted without it.
            leaves = _isDone || _sent == 0;
        }

        Send(leaves ? HeardKind.Done : HeardKind.Left);
        try
        {
            _process.StandardInput.Close();
        }
        catch (IOException)
        {
            // It has ended by itself.
        }

        if (leaves)
        {
            await Ended();
        }

        _process.Dispose();
    }

    private void Send(HeardKind kind)
    {
        string? why = null;
        lock (_gate)
        {
            if (_isDone || _whyLost is not null)
            {
                return;
            }

            if (_unanswered.Count >= MostUnanswered
                || (_unanswered.TryPeek(out long oldest) && _time.GetElapsedTime(oldest) > Patience))
            {
                why = $"the guardian did not answer within {Patience.TotalMilliseconds:0} ms: it hangs or is stopped";
            }
            else
            {
                _isDone = kind is HeardKind.Done or HeardKind.Left;
                _unanswered.Enqueue(_time.GetTimestamp());
                try
                {
                    Write(BeatText.Write(
                        kind, ++_sent, _witness?.HighestCommanded ?? 0, _witness?.HighestSeen ?? 0,
                        _witness?.LastBelieved, _witness is { IsDoubted: true }));
                }
                catch (Exception failure) when (failure is IOException or ObjectDisposedException)
                {
                    why = $"the guardian's pipe has broken: {failure.Message}";
                }
            }
        }

        if (why is not null)
        {
            Lose(why);
        }
    }

    private void Write(string line)
    {
        StreamWriter to = _process.StandardInput;
        to.Write(line + "\n");
        to.Flush();
    }

    private async Task Listen()
    {
        try
        {
            while (await _process.StandardOutput.ReadLineAsync() is { } line)
            {
                Hear(line);
            }
        }
        catch (Exception failure) when (failure is IOException or ObjectDisposedException or InvalidOperationException)
        {
            // As where it ends: what it says no longer reaches us.
        }

        Lose("the guardian has ended");
    }

    private void Hear(string line)
    {
        string[] words = line.Split(' ', 2);
        switch (words)
        {
            case ["ready", { } read]:
                _ready.TrySetResult(read);
                break;
            case ["unable", { } why]:
                _ready.TrySetException(new BenchException($"the guardian: {why}; nothing was energised"));
                break;
            case [BeatText.Answer, _]:
                lock (_gate)
                {
                    _unanswered.TryDequeue(out _);
                }

                break;
            default:
                Lose($"the guardian said '{Instruments.Replies.Printable.Text(line)}', which is no answer");
                break;
        }
    }

    private void Lose(string why)
    {
        Action<string>? tell;
        lock (_gate)
        {
            if (_isDone || _whyLost is not null)
            {
                return;
            }

            _whyLost = why;
            tell = _lost;
        }

        _ready.TrySetException(new BenchException($"{why} before it was ready; nothing was energised"));
        _ = _ready.Task.Exception;
        tell?.Invoke(why);
    }

    private async Task Ended()
    {
        using var patience = new CancellationTokenSource(EndLimit, _time);
        try
        {
            await _process.WaitForExitAsync(patience.Token);
            await _listening;
        }
        catch (OperationCanceledException)
        {
            // It was told that its work is done and that this pipe is closed: it holds up nobody.
        }
    }
}
