namespace BenchRunner.Soak.Simulated;

/// <summary>Runs everything that a simulation starts on the caller's thread, first come first served; time goes on only
/// when nothing is left to run.</summary>
internal sealed class OneThread(VirtualTime time) : TaskScheduler
{
    // A run makes some hundred thousand steps; one that does not get on in time at all is a loop without a wait.
    private const long MostSteps = 20_000_000;

    private readonly Lock _gate = new();
    private readonly Queue<Task> _ready = new();
    private readonly int _thread = Environment.CurrentManagedThreadId;
    private bool _strayed;

    /// <inheritdoc/>
    public override int MaximumConcurrencyLevel => 1;

    /// <summary>Runs work to its end.</summary>
    /// <param name="work">The work.</param>
    /// <param name="within">Simulated time that it may take.</param>
    /// <exception cref="SimulationException">It hangs, or something of it ran on another thread.</exception>
    public void Run(Func<Task> work, TimeSpan within)
    {
        Task all = new TaskFactory(this).StartNew(work).Unwrap();
        long steps = 0;
        while (!all.IsCompleted)
        {
            if (TryNext(out Task? next))
            {
                TryExecuteTask(next);
            }
            else if (!time.Advance())
            {
                throw new SimulationException("hangs: nothing is runnable and no timer is set");
            }

            if (_strayed)
            {
                throw new SimulationException("work came back from a thread of its own: it would not replay");
            }

            if (time.Now > within || ++steps > MostSteps)
            {
                throw new SimulationException($"hangs: not at its end after {time.Now.TotalSeconds:0} s and {steps} steps");
            }
        }

        all.GetAwaiter().GetResult();
    }

    /// <inheritdoc/>
    protected override void QueueTask(Task task)
    {
        lock (_gate)
        {
            _strayed |= Environment.CurrentManagedThreadId != _thread;
            _ready.Enqueue(task);
        }
    }

    /// <inheritdoc/>
    protected override bool TryExecuteTaskInline(Task task, bool taskWasPreviouslyQueued) => false;

    /// <inheritdoc/>
    protected override IEnumerable<Task> GetScheduledTasks()
    {
        lock (_gate)
        {
            return [.. _ready];
        }
    }

    private bool TryNext([System.Diagnostics.CodeAnalysis.NotNullWhen(true)] out Task? next)
    {
        lock (_gate)
        {
            return _ready.TryDequeue(out next);
        }
    }
}
