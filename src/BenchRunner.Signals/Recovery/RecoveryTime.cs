using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Recovery;

/// <summary>
/// Reverse recovery time, s: <c>trr</c>, and its parts <c>ta</c>, <c>tb</c> and <c>softness</c>, each by the rule that
/// ends the recovery.
/// </summary>
/// <remarks>
/// From t0, where irr crosses zero upwards, to an end that is a matter of definition: one recovery (20 A after 10 ns,
/// tail of 20 ns) lasts 47.58 ns by the chord and 88.24 ns by the fall to 2 %. Hence the rule is part of the ID.
/// </remarks>
public static class RecoveryTime
{
    private const double ChordHigh = 0.90;
    private const double ChordLow = 0.25;
    private const double NearPart = 0.01;

    /// <summary><c>trr/chord-90-25</c>: the chord through the first 90 % and 25 % of irm after the peak meets
    /// zero.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <returns>The end, or why there is none.</returns>
    /// <remarks>Source: IEC 60747-2 and -8. Exact on a straight fall; on an exponential tail 1.878960 τ after the peak.
    /// </remarks>
    public static Instant ChordEnd(in RecoveryEvent recovery)
    {
        Instant high = recovery.Fall(ChordHigh);
        Instant low = recovery.Fall(ChordLow);
        return (high.Reason ?? low.Reason) is { } reason
            ? Instant.None(reason)
            : Instant.Of(low.At + ((low.At - high.At) * ChordLow / (ChordHigh - ChordLow)));
    }

    /// <summary><c>trr/fall-N</c>: irr first falls to N % of irm.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="fraction">N as a fraction.</param>
    /// <returns>The end; "end undecided" where a local minimum between peak and end lies so near the level that noise
    /// decides which of two ring periods ends the recovery.</returns>
    /// <remarks>Near: within max(3 σ, 1 % of irm); local: with a prominence of at least max(3 σ, 1 LSB).</remarks>
    public static Instant FallEnd(in RecoveryEvent recovery, double fraction)
    {
        Instant end = recovery.Fall(fraction);
        if (end.Reason is not null)
        {
            return end;
        }

        double level = fraction * recovery.Top.Height;
        double near = Math.Max(3 * recovery.Sigma, NearPart * recovery.Top.Height);
        double prominence = Math.Max(3 * recovery.Sigma, recovery.Step);
        Extremes minima = new(recovery.Irr, prominence, minima: true, recovery.Top.Sample, recovery.Irr.Length - 1);
        while (minima.Next() && minima.Sample < end.At)
        {
            if (Math.Abs(recovery.Irr[minima.Sample] - level) <= near)
            {
                return Instant.None("end undecided");
            }
        }

        return end;
    }

    /// <summary><c>trr</c>: from t0 to the end.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="end">The end by one of the rules.</param>
    /// <returns>The time, s.</returns>
    public static Reading Whole(in RecoveryEvent recovery, Instant end) =>
        Form(recovery, end, recovery.SampleInterval * (end.At - recovery.Start.At), recovery.Start.At, end.At);

    /// <summary><c>ta</c>: from t0 to the peak.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="end">The end by one of the rules: without it there is no division.</param>
    /// <returns>The time, s.</returns>
    public static Reading Rise(in RecoveryEvent recovery, Instant end)
    {
        double peak = recovery.Top.Position;
        return Form(recovery, end, recovery.SampleInterval * (peak - recovery.Start.At), recovery.Start.At, peak);
    }

    /// <summary><c>tb</c>: from the peak to the end.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="end">The end by one of the rules.</param>
    /// <returns>The time, s.</returns>
    public static Reading Decay(in RecoveryEvent recovery, Instant end)
    {
        double peak = recovery.Top.Position;
        return Form(recovery, end, recovery.SampleInterval * (end.At - peak), peak, end.At);
    }

    /// <summary><c>softness</c>: tb / ta; a snappy diode is well below 1.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="end">The end by one of the rules.</param>
    /// <returns>The ratio, 1.</returns>
    public static Reading Softness(in RecoveryEvent recovery, Instant end)
    {
        double peak = recovery.Top.Position;
        double ratio = (end.At - peak) / (peak - recovery.Start.At);
        return Form(recovery, end, ratio, recovery.Start.At, end.At);
    }

    private static Reading Form(in RecoveryEvent recovery, Instant end, double value, double from, double to)
    {
        if ((recovery.Reason ?? recovery.Start.Reason ?? end.Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        // The peak lies between samples; a fall within one sample can end before it.
        return end.At > recovery.Top.Position && recovery.Top.Position > recovery.Start.At
            ? Reading.Of(value, from, to)
            : Reading.None("the recovery is too fast for its samples");
    }
}
