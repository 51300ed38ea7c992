using System.Text.Json;
using System.Threading.Channels;
using BenchRunner.Acceptance.Events;

namespace BenchRunner.Runner.Guarding;

/// <summary>What the guardian did, one event a line, appended and flushed to the disk; and to the operator's screen.</summary>
/// <remarks>
/// Written by a task of its own: a full disk or a screen that nobody reads never holds up what makes the bench safe. The
/// file is made with the first event, so that a guardian that had nothing to do leaves none.
/// </remarks>
/// <param name="path">The file.</param>
/// <param name="screen">Takes each event as a line too.</param>
public sealed class GuardianLog(string path, TextWriter screen) : IEventSink, IAsyncDisposable
{
    private readonly Channel<BenchEvent> _events = Channel.CreateUnbounded<BenchEvent>();
    private Task? _writing;

    /// <summary>Where the log of a bench is: beside its file, or beside the evidence where each run has a new bench.</summary>
    public static string PathOf(string besides) => Path.ChangeExtension(Path.GetFullPath(besides), ".guardian.jsonl");

    /// <inheritdoc/>
    public void Receive(BenchEvent happened)
    {
        _events.Writer.TryWrite(happened);
        lock (_events)
        {
            _writing ??= Task.Run(Write);
        }
    }

    /// <summary>Waits until all is written, as far as it can be.</summary>
    public async ValueTask DisposeAsync()
    {
        _events.Writer.TryComplete();
        if (_writing is { } writing)
        {
            await Task.WhenAny(writing, Task.Delay(TimeSpan.FromSeconds(5), TimeProvider.System));
        }
    }

    private async Task Write()
    {
        await foreach (BenchEvent happened in _events.Reader.ReadAllAsync())
        {
            string? failed = Append(happened);
            try
            {
                await screen.WriteLineAsync($"{happened.At:HH:mm:ss.fff} guardian  {happened.Message}");
                if (failed is not null)
                {
                    await screen.WriteLineAsync($"guardian  this is not in its log: {failed}");
                }
            }
            catch (IOException)
            {
                // Nobody is there to read it; the file has it.
            }
        }
    }

    private string? Append(BenchEvent happened)
    {
        try
        {
            using var file = new FileStream(path, FileMode.Append, FileAccess.Write, FileShare.Read);
            JsonSerializer.Serialize(file, happened, GuardianJson.Default.BenchEvent);
            file.Write("\n"u8);
            file.Flush(flushToDisk: true);
            return null;
        }
        catch (Exception failure) when (failure is IOException or UnauthorizedAccessException)
        {
            return failure.Message;
        }
    }
}
