using BenchRunner.Safety.Supervision;

namespace BenchRunner.Runner.Exchanges;

/// <summary>The enclosure as the watch sees it through the interlock loop.</summary>
public sealed class Enclosure(SafetySupervisor supervisor, TimeProvider time)
{
    private static readonly TimeSpan LookEvery = TimeSpan.FromMilliseconds(20);

    /// <summary>Whether the loop was closed at the last poll.</summary>
    public bool IsClosed => supervisor.LastInterlock is { LoopClosed: true };

    /// <summary>How often it was opened since the watch began; one that was open then counts.</summary>
    public int Openings => supervisor.LoopOpenings;

    /// <summary>Waits, without end, until the enclosure is closed.</summary>
    public Task Closed(CancellationToken cancel) => Until(() => IsClosed, cancel);

    /// <summary>Waits, without end, until the enclosure is open, or was since the openings were counted.</summary>
    public Task Opened(int since, CancellationToken cancel) => Until(() => !IsClosed || Openings > since, cancel);

    private async Task Until(Func<bool> isSo, CancellationToken cancel)
    {
        while (!isSo())
        {
            await Task.Delay(LookEvery, time, cancel);
        }
    }
}
