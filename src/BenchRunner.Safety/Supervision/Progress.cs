namespace BenchRunner.Safety.Supervision;

/// <summary>What the runner said that it is at, and until when it must say something else.</summary>
/// <remarks>Marks come from the runner's road, never from a timer: a runner that hangs makes none.</remarks>
internal sealed class Progress(TimeProvider time)
{
    private sealed record Mark(string What, long At, TimeSpan Within);

    private Mark? _mark;

    public void At(string what, TimeSpan within) => Volatile.Write(ref _mark, new Mark(what, time.GetTimestamp(), within));

    public void None() => Volatile.Write(ref _mark, null);

    /// <summary>Why it is overdue; null where it is in time or nothing is due.</summary>
    public string? Overdue => Volatile.Read(ref _mark) is { } mark && time.GetElapsedTime(mark.At) > mark.Within
        ? $"the run makes no progress: {mark.What} for more than {mark.Within.TotalSeconds:0.#} s" : null;
}
