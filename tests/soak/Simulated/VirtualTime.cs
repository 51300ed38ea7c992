namespace BenchRunner.Soak.Simulated;

/// <summary>A clock that stands still until it is moved to the next timer: one simulation, one thread, no
/// waiting.</summary>
/// <remarks>Timers that are due at the same moment go off in the order in which they were set. The wall clock may be
/// stepped by itself; the monotonic one never is.</remarks>
internal sealed class VirtualTime : TimeProvider
{
    private static readonly DateTimeOffset _begin = new(2026, 1, 5, 8, 0, 0, TimeSpan.Zero);
    private readonly PriorityQueue<Setting, (long Due, long Order)> _due = new();
    private TimeSpan _step;
    private long _order;

    /// <inheritdoc/>
    public override long TimestampFrequency => TimeSpan.TicksPerSecond;

    /// <summary>Time since the start.</summary>
    public TimeSpan Now { get; private set; }

    /// <inheritdoc/>
    public override long GetTimestamp() => Now.Ticks;

    /// <inheritdoc/>
    public override DateTimeOffset GetUtcNow() => _begin + Now + _step;

    /// <summary>Somebody sets the computer's wall clock.</summary>
    public void StepWallClock(TimeSpan by) => _step += by;

    /// <inheritdoc/>
    public override ITimer CreateTimer(TimerCallback callback, object? state, TimeSpan dueTime, TimeSpan period)
    {
        var timer = new Timer(this, callback, state);
        timer.Change(dueTime, period);
        return timer;
    }

    /// <summary>Does something later.</summary>
    public void After(TimeSpan delay, Action what) => CreateTimer(
        static what => ((Action)what!)(), what, delay, Timeout.InfiniteTimeSpan);

    /// <summary>Moves the clock to the next timer and lets it go off.</summary>
    /// <returns>False: no timer is set.</returns>
    public bool Advance()
    {
        while (_due.TryDequeue(out Setting setting, out (long Due, long Order) at))
        {
            if (setting.Timer.Setting == setting.Number)
            {
                Now = TimeSpan.FromTicks(Math.Max(at.Due, Now.Ticks));
                setting.Timer.GoOff();
                return true;
            }
        }

        return false;
    }

    private readonly record struct Setting(Timer Timer, long Number);

    private sealed class Timer(VirtualTime time, TimerCallback callback, object? state) : ITimer
    {
        private TimeSpan _period;

        /// <summary>Number of the setting in force; 0: it is not set.</summary>
        public long Setting { get; private set; }

        public bool Change(TimeSpan dueTime, TimeSpan period)
        {
            _period = period;
            if (dueTime == Timeout.InfiniteTimeSpan)
            {
                Setting = 0;
                return true;
            }

            Setting = ++time._order;
            time._due.Enqueue(new Setting(this, Setting), ((time.Now + dueTime).Ticks, Setting));
            return true;
        }

        public void GoOff()
        {
            Change(_period > TimeSpan.Zero ? _period : Timeout.InfiniteTimeSpan, _period);
            callback(state);
        }

        public void Dispose() => Setting = 0;

        public ValueTask DisposeAsync()
        {
            Dispose();
            return ValueTask.CompletedTask;
        }
    }
}
