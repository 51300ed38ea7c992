namespace BenchRunner.Instruments.Sessions;

/// <summary>Whose turn it is: one at a time, in the order in which they came.</summary>
/// <remarks>Whoever waited goes on where it runs; a semaphore of the framework would move it to the thread
/// pool.</remarks>
internal sealed class Turn
{
    private readonly Lock _gate = new();
    private readonly Queue<TaskCompletionSource> _waiting = new();
    private bool _isTaken;

    /// <summary>Waits for the turn; <see cref="Give"/> ends it.</summary>
    /// <exception cref="OperationCanceledException">Cancelled: it was not taken.</exception>
    public ValueTask Take(CancellationToken cancel)
    {
        cancel.ThrowIfCancellationRequested();
        TaskCompletionSource waiter;
        lock (_gate)
        {
            if (!_isTaken)
            {
                _isTaken = true;
                return ValueTask.CompletedTask;
            }

            waiter = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
            _waiting.Enqueue(waiter);
        }

        return Wait(waiter, cancel);
    }

    /// <summary>Hands the turn to who waits longest.</summary>
    public void Give()
    {
        lock (_gate)
        {
            while (_waiting.TryDequeue(out var next))
            {
                // One that was cancelled meanwhile has left.
                if (next.TrySetResult())
                {
                    return;
                }
            }

            _isTaken = false;
        }
    }

    private static async ValueTask Wait(TaskCompletionSource waiter, CancellationToken cancel)
    {
        using var cancelled = cancel.UnsafeRegister(
            static (waiter, cancel) => ((TaskCompletionSource)waiter!).TrySetCanceled(cancel), waiter);
        await waiter.Task;
    }
}
