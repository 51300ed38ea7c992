using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Safety.Latches;

namespace BenchRunner.Guards;

/// <summary>The mark that the guardian leaves beside the bench file: nobody uses the bench before a person has
/// looked.</summary>
/// <remarks>Written by a thread of its own, there from the start: a disk that hangs, or a system that gives no further
/// thread, must not hold up what makes the bench safe.</remarks>
internal sealed class LatchMark
{
    private static readonly TimeSpan Within = TimeSpan.FromSeconds(5);
    private readonly TaskCompletionSource<string> _reason = new();
    private readonly TaskCompletionSource<bool> _left = new(TaskCreationOptions.RunContinuationsAsynchronously);
    private readonly LatchFile _latch;
    private readonly bool _isDue;
    private readonly EventSource _events;
    private readonly TimeProvider _time;

    public LatchMark(Bench bench, EventSource events, TimeProvider time)
    {
        _latch = new LatchFile(bench.Source.Path);
        _isDue = bench.Fake is null;
        _events = events;
        _time = time;
        new Thread(Leave) { IsBackground = true, Name = "latch" }.Start();
    }

    /// <summary>Begins to leave it; a bench that is new at each start gets none. Waits for nothing and never
    /// throws.</summary>
    public void Begin(string reason)
    {
        if (_isDue)
        {
            _reason.TrySetResult($"the guardian ended the run: {reason}");
        }
    }

    /// <summary>Whether it stands, or none was begun; says so loudly where it could not be left.</summary>
    public async Task<bool> Stands()
    {
        try
        {
            return !_reason.Task.IsCompleted || await _left.Task.WaitAsync(Within, _time);
        }
        catch (TimeoutException)
        {
            Say($"the disk did not take the mark within {Within.TotalSeconds:0} s");
            return false;
        }
    }

    private void Leave()
    {
        string reason = _reason.Task.GetAwaiter().GetResult();
        try
        {
            _latch.Set(_time.GetUtcNow(), reason);
            _left.SetResult(true);
        }
        catch (Exception failure)
        {
            Say(failure.Message);
            _left.SetResult(false);
        }
    }

    private void Say(string why) => _events.Say(
        Severity.Alarm, "guardian-latch-not-written", $"THE BENCH IS NOT LATCHED: {why}; let nobody use it");
}
