namespace BenchRunner.Safety;

/// <summary>Bounds that this program sets for itself beside those of the bench file; the lab's hardware has its own.</summary>
public static class SafetyLimits
{
    /// <summary>How long a permit lives without a complete poll that finds nothing.</summary>
    public static TimeSpan PermitLife { get; } = TimeSpan.FromSeconds(10);

    /// <summary>Time from the start of a poll to the start of the next.</summary>
    public static TimeSpan PollEvery { get; } = TimeSpan.FromMilliseconds(80);

    /// <summary>What a poll may take beyond the wait for one reply before it is a doubt; with the pause between polls less
    /// than the guardian's silence.</summary>
    public static TimeSpan PollSlack { get; } = TimeSpan.FromMilliseconds(30);

    /// <summary>Time from one look at the outputs of supply and pulser to the next.</summary>
    public static TimeSpan HeartbeatEvery { get; } = TimeSpan.FromMilliseconds(150);

    /// <summary>Time after the last poll at which the interlock controller's own watchdog acts.</summary>
    /// <remarks>Longer than a poll may take, so that it acts only where this program is dead or hangs.</remarks>
    public static TimeSpan Watchdog { get; } = TimeSpan.FromSeconds(5);

    /// <summary>Longest time between the beginnings of two polls, beyond what waiting for their replies may take: a
    /// computer that was suspended, or a program that stood still, goes on with nothing.</summary>
    public static TimeSpan PollGap { get; } = TimeSpan.FromMilliseconds(400);

    /// <summary>How far the measured bus may lie above what the permit allows before it is a trip, relative.</summary>
    public const double OverVoltageMargin = 0.05;
}
