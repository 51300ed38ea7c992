using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Files;

/// <summary>Serials from a stream that nobody answers questions on: a list, or a bar-code reader on a line of its
/// own.</summary>
/// <remarks>It is read ahead, so that a serial that comes too early is said at once. It waits its turn; it can answer
/// nothing.</remarks>
internal sealed class StreamSerials : ISerialReader
{
    private readonly Lock _gate = new();
    private readonly Queue<string> _waiting = new();
    private readonly Sequence _sequence;
    private readonly Action<string> _say;
    private TaskCompletionSource<string?>? _asked;
    private bool _begun;
    private bool _ended;

    /// <summary>Begins to read; a thread is left behind in a read that never returns, and ends with the
    /// program.</summary>
    public StreamSerials(Stream stream, Sequence sequence, Action<string> say)
    {
        _sequence = sequence;
        _say = say;
        new Thread(() => Read(stream)) { IsBackground = true, Name = "serials" }.Start();
    }

    public IReadOnlyList<string> Waiting
    {
        get
        {
            lock (_gate)
            {
                return [.. _waiting];
            }
        }
    }

    public Task<string?> Next(CancellationToken cancel)
    {
        lock (_gate)
        {
            _begun = true;
            if (_ended || _waiting.Count > 0)
            {
                return Task.FromResult(_waiting.TryDequeue(out string? serial) ? serial : null);
            }

            _asked = new TaskCompletionSource<string?>(TaskCreationOptions.RunContinuationsAsynchronously);
            return _asked.Task.WaitAsync(cancel);
        }
    }

    private void Read(Stream stream)
    {
        try
        {
            using var lines = new StreamReader(stream);
            for (int number = 1; lines.ReadLine() is { } line; number++)
            {
                Take(line.Trim(), number);
            }
        }
        catch (IOException gone)
        {
            _say($"standard input: {gone.Message}; no more serials are taken from it");
        }

        lock (_gate)
        {
            _ended = true;
            _asked?.TrySetResult(null);
        }
    }

    private void Take(string serial, int number)
    {
        if (serial.Length == 0)
        {
            return;
        }

        if (SerialForm.Check(serial, _sequence, $"standard input:{number}") is { } problem)
        {
            _say(problem.ToString());
            return;
        }

        lock (_gate)
        {
            if (_asked?.TrySetResult(serial) == true)
            {
                return;
            }

            _waiting.Enqueue(serial);
            if (_begun)
            {
                _say($"{serial}: came while no serial was asked for; it waits its turn");
            }
        }
    }
}
