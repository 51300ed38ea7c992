using BenchRunner.Instruments.Links;
using FakeBench.Instruments;
using FakeBench.Scpi;

namespace BenchRunner.Soak.Simulated;

/// <summary>A link to a front panel in memory: messages take time, and what goes wrong on the way goes wrong
/// here.</summary>
/// <param name="name">The link as the bench file names it.</param>
/// <param name="panel">The instrument.</param>
/// <param name="time">The clock.</param>
/// <param name="latency">How long the next message or reply takes.</param>
/// <param name="obeyed">Told after each message that the instrument has obeyed.</param>
internal sealed class MemoryLink(string name, Instrument panel, VirtualTime time, Func<TimeSpan> latency, Action obeyed) : ILink
{
    private readonly int _boots = panel.Boots;
    private readonly MessageFramer _framer = new();
    private readonly Queue<string?> _messages = new();
    private readonly Queue<byte> _input = new();
    private TaskCompletionSource? _reader;
    private bool _busy;
    private bool _deaf;
    private bool _ended;
    private bool _reset;

    /// <inheritdoc/>
    public string Name => name;

    /// <summary>Whether the client has closed it.</summary>
    public bool IsClosed { get; private set; }

    /// <inheritdoc/>
    public bool HasInput => IsClosed ? throw new LinkException(name, "connection closed") : _input.Count > 0;

    /// <inheritdoc/>
    public void Write(ReadOnlySpan<byte> message)
    {
        if (IsClosed || _reset)
        {
            throw new LinkException(name, IsClosed ? "connection closed" : "connection lost (ConnectionReset)");
        }

        foreach (string? whole in _deaf || _ended ? [] : _framer.Take(message))
        {
            _messages.Enqueue(whole);
        }

        Serve();
    }

    /// <inheritdoc/>
    public async ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel)
    {
        cancel.ThrowIfCancellationRequested();
        while (_input.Count == 0)
        {
            if (IsClosed || _reset)
            {
                throw new LinkException(name, IsClosed ? "connection closed" : "connection lost (ConnectionReset)");
            }

            if (_ended)
            {
                return 0;
            }

            _reader = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
            using CancellationTokenRegistration over = cancel.UnsafeRegister(
                static (reader, cancel) => ((TaskCompletionSource)reader!).TrySetCanceled(cancel), _reader);
            await _reader.Task;
        }

        int count = Math.Min(buffer.Length, _input.Count);
        for (int i = 0; i < count; i++)
        {
            buffer.Span[i] = _input.Dequeue();
        }

        return count;
    }

    /// <summary>The instrument ends the stream, as one does that serves nobody more.</summary>
    public void End() => (_ended, _) = (true, Wake());

    /// <inheritdoc/>
    public void Dispose()
    {
        IsClosed = true;
        _messages.Clear();
        Wake();
    }

    private void Serve()
    {
        if (!_busy && _messages.TryDequeue(out string? message))
        {
            _busy = true;
            time.After(latency(), () => Obey(message));
        }
    }

    private void Obey(string? message)
    {
        if (IsClosed || _reset)
        {
            return;
        }

        Answer answer = panel.Obey(message);
        obeyed();
        answer = panel.Boots == _boots ? answer : answer with { CutShort = true };
        time.After(answer.Late + latency(), () => Deliver(answer, 0));
    }

    private void Deliver(Answer answer, int from)
    {
        int length = answer.CutShort ? answer.Bytes.Length / 2 : answer.Bytes.Length;
        int piece = answer.Piece > 0 ? Math.Min(answer.Piece, length - from) : length - from;
        foreach (byte value in answer.Bytes.AsSpan(from, piece))
        {
            _input.Enqueue(value);
        }

        Wake();
        if (from + piece < length)
        {
            time.After(answer.Gap, () => Deliver(answer, from + piece));
            return;
        }

        if (answer.CutShort)
        {
            _input.Clear();
            _reset = true;
            Wake();
            return;
        }

        _busy = false;
        if (answer.Deaf)
        {
            _deaf = true;
            _messages.Clear();
        }

        Serve();
    }

    private bool Wake() => _reader?.TrySetResult() ?? false;
}
