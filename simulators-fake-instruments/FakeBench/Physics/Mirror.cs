namespace FakeBench.Physics;

/// <summary>Low and high exchanged: the half bridge with its load to the negative rail and the high place firing is the
/// one with the load to the positive rail, seen in a mirror.</summary>
public static class Mirror
{
    /// <summary>The signal of the other place; that of bus and load is its own.</summary>
    public static Signal Of(Signal signal) => signal switch
    {
        Signal.VgsLow => Signal.VgsHigh,
        Signal.VdsLow => Signal.VdsHigh,
        Signal.IdLow => Signal.IdHigh,
        Signal.VgsHigh => Signal.VgsLow,
        Signal.VdsHigh => Signal.VdsLow,
        Signal.IdHigh => Signal.IdLow,
        _ => signal,
    };

    /// <summary>The name of the other place's channel, e.g. <c>vds_high</c> for <c>vds_low</c>.</summary>
    public static string Of(string channel)
    {
        ArgumentNullException.ThrowIfNull(channel);
        const string low = "_low", high = "_high";
        return channel.EndsWith(low, StringComparison.Ordinal) ? channel[..^low.Length] + high
            : channel.EndsWith(high, StringComparison.Ordinal) ? channel[..^high.Length] + low
            : channel;
    }

    /// <summary>Rows of samples in the order of <see cref="Signal"/>, with the other place's in each.</summary>
    public static double[][] Of(double[][] rows)
    {
        ArgumentNullException.ThrowIfNull(rows);
        return [.. Enum.GetValues<Signal>().Select(signal => rows[(int)Of(signal)])];
    }
}
