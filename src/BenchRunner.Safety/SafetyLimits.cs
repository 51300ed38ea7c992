namespace BenchRunner.Safety;

/// <summary>Bounds that the house sets for itself; the lab's hardware has its own.</summary>
public static class SafetyLimits
{
    /// <summary>Below this DC voltage a bus counts as down, V. IEC 61140 puts the limit of extra-low voltage at 120 V
    /// DC (from memory); half of it is used here.</summary>
    public const double BusDown = 60;

    /// <summary>How long a permit lives without a complete poll that finds nothing.</summary>
    public static TimeSpan PermitLife { get; } = TimeSpan.FromSeconds(10);

    /// <summary>Time from the start of a poll to the start of the next.</summary>
    public static TimeSpan PollEvery { get; } = TimeSpan.FromMilliseconds(80);

    /// <summary>Time after the last poll at which the interlock controller's own watchdog acts.</summary>
    /// <remarks>Longer than a poll may take, so that it acts only where this program is dead or hangs.</remarks>
    public static TimeSpan Watchdog { get; } = TimeSpan.FromSeconds(5);

    /// <summary>How far the measured bus may lie above what the permit allows before it is a trip, relative.</summary>
    public const double OverVoltageMargin = 0.05;
}
