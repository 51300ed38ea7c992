using BenchRunner.Safety.Guardians;

namespace BenchRunner.Soak.Simulated;

/// <summary>The pipe between runner and guardian in memory: lines that take time, in their order.</summary>
/// <param name="time">The clock.</param>
/// <param name="latency">How long the next line takes.</param>
internal sealed class MemoryBeats(VirtualTime time, TimeSpan latency) : IBeatSource
{
    private readonly Queue<string?> _lines = new();
    private TaskCompletionSource? _reader;
    private long _due = 1;

    /// <summary>Writes a line; null: the pipe is closed.</summary>
    public void Write(string? line) => time.After(latency, () =>
    {
        _lines.Enqueue(line);
        _reader?.TrySetResult();
    });

    /// <inheritdoc/>
    public async Task<Heard> Next()
    {
        while (_lines.Count == 0)
        {
            _reader = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
            await _reader.Task;
        }

        // A pipe that was closed stays so.
        return _lines.Peek() is null ? new Heard(HeardKind.Ended) : BeatText.Read(_lines.Dequeue()!, _due++);
    }
}
