namespace BenchRunner.Safety.Supervision;

/// <summary>Notices that the computer was suspended, or that this program stood still, between two polls.</summary>
/// <remarks>
/// By the monotonic clock and by the calendar: the first may stand still while a computer sleeps, the second does not.
/// A calendar that is set forward is taken for a sleep, which is the safe side; one that is set back is not looked at.
/// </remarks>
internal sealed class PollGap(TimeSpan limit, TimeProvider time)
{
    private (long Stamp, DateTimeOffset At)? _last;

    /// <summary>A poll begins.</summary>
    /// <returns>What is wrong; null: nothing.</returns>
    public string? Begins()
    {
        (long Stamp, DateTimeOffset At) now = (time.GetTimestamp(), time.GetUtcNow());
        (long Stamp, DateTimeOffset At)? before = _last;
        _last = now;
        if (before is not { } last)
        {
            return null;
        }

        TimeSpan monotonic = time.GetElapsedTime(last.Stamp, now.Stamp);
        TimeSpan calendar = now.At - last.At;
        TimeSpan gap = monotonic > calendar ? monotonic : calendar;
        return gap > limit
            ? $"nothing was watched for {gap.TotalSeconds:0.0} s ({monotonic.TotalSeconds:0.0} s by the monotonic clock): "
                + "the computer was suspended or this program stood still"
            : null;
    }
}
