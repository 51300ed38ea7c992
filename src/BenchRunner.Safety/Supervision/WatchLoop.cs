using BenchRunner.Instruments.Sessions;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.Supervision;

/// <summary>Polls on and on in a task of its own, and notices where polls stay away: the computer slept, this program stood
/// still, or an instrument holds a poll up.</summary>
/// <param name="witness">Of the bench's voltmeter.</param>
/// <param name="time">The clock.</param>
internal sealed class WatchLoop(BusWitness witness, TimeProvider time) : IDisposable
{
    private readonly CancellationTokenSource _end = new();
    private readonly PollGap _gap = new(
        SafetyLimits.PollGap + TimeSpan.FromSeconds(2 * witness.Limits.ReplyWithin), time);

    // A poll that waits longer than for one reply is late before the guardian would take it for a hang: it may wait
    // behind a command to the same instrument, or for a link that is opened again.
    private readonly TimeSpan _within = TimeSpan.FromSeconds(witness.Limits.ReplyWithin) + SafetyLimits.PollSlack;
    private Task _watching = Task.CompletedTask;

    /// <summary>One complete poll. Ended by its own patience: cancelling it would leave its reply on the line.</summary>
    public required Func<Task<Finding>> Poll { get; init; }

    /// <summary>Takes what a poll found.</summary>
    public required Action<Finding> Found { get; init; }

    /// <summary>Told again and again, with the reason, while a poll is late.</summary>
    public required Action<string> Late { get; init; }

    /// <summary>Told again and again while a poll is out.</summary>
    public required Action Waiting { get; init; }

    /// <summary>Begins.</summary>
    public void Begin() => _watching = Background.Start(Watch);

    /// <summary>Asks for the end and waits for the last poll.</summary>
    /// <param name="waiting">Told again and again until then.</param>
    public async Task End(Action waiting)
    {
        _end.Cancel();
        while (true)
        {
            try
            {
                await _watching.WaitAsync(SafetyLimits.PollEvery, time);
                return;
            }
            catch (TimeoutException)
            {
                waiting();
            }
        }
    }

    /// <inheritdoc/>
    public void Dispose() => _end.Dispose();

    private async Task Watch()
    {
        using var timer = new PeriodicTimer(SafetyLimits.PollEvery, time);
        try
        {
            while (await timer.WaitForNextTickAsync(_end.Token))
            {
                string? gap = _gap.Begins();
                Finding found = await InTime(Poll());
                Found(gap is not null && witness.MayBeEnergised ? new Finding(SupervisorEvent.Doubt, gap) : found);
            }
        }
        catch (OperationCanceledException) when (_end.IsCancellationRequested)
        {
            // The run has ended.
        }
    }

    private async Task<Finding> InTime(Task<Finding> poll)
    {
        long begun = time.GetTimestamp();
        while (true)
        {
            try
            {
                return await poll.WaitAsync(SafetyLimits.PollEvery, time);
            }
            catch (TimeoutException)
            {
                if (time.GetElapsedTime(begun) >= _within)
                {
                    Late($"the watch lost sight of the bench: no word of interlock and voltmeter within "
                        + $"{_within.TotalSeconds:0.##} s");
                }

                Waiting();
            }
        }
    }
}
