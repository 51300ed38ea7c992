using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Recovery;

/// <summary>Slopes around the recovery, A/s: <c>dif_dt</c> before it (commutation), <c>dirr_dt</c> after its
/// peak.</summary>
public static class RecoverySlope
{
    /// <summary><c>dirr_dt</c>, definition <c>slope/90-25</c>: magnitude of the fall between 90 % and 25 % of
    /// irm.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <returns>Magnitude of the mean slope, A/s.</returns>
    /// <remarks>A snappy diode falls within a few samples: resolution and bandwidth then decide.</remarks>
    public static Reading Fall(in RecoveryEvent recovery)
    {
        Instant high = recovery.Fall(0.90);
        Instant low = recovery.Fall(0.25);
        if ((high.Reason ?? low.Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        double time = (low.At - high.At) * recovery.SampleInterval;
        return Reading.Of((0.90 - 0.25) * recovery.Top.Height / time, high.At, low.At);
    }

    /// <summary><c>dif_dt</c>, definition <c>slope/50-50</c>: slope of the commutation between irr = −50 % of i_on and
    /// t0.
    /// </summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="current">Current of the firing switch, A, on the grid of irr (or irr itself: while the load's
    /// current stands still both have one slope).</param>
    /// <param name="onCurrent">i_on, A.</param>
    /// <returns>The mean slope of the switch's current, A/s.</returns>
    public static Reading Commutation(in RecoveryEvent recovery, ReadOnlySpan<double> current, Reading onCurrent)
    {
        if ((recovery.Reason ?? recovery.Start.Reason ?? onCurrent.Because("i_on").Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        double end = recovery.Start.At;
        double level = -0.5 * onCurrent.Value;
        double? half = Crossing.First(
            recovery.Irr, level, recovery.Hysteresis, CrossingDirection.Rising, recovery.Departure, end);
        if (half is not { } start)
        {
            return Reading.None("irr does not cross -50 % of i_on before t0");
        }

        double change = Integral.At(current, end) - Integral.At(current, start);
        return Reading.Of(change / ((end - start) * recovery.SampleInterval), start, end);
    }
}
