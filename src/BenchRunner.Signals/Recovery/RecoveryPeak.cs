using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Recovery;

/// <summary>Peak reverse recovery current, A: <c>irm</c>.</summary>
/// <remarks>Contains the current that charges the output capacitance: of a fast device that is most of it.</remarks>
public static class RecoveryPeak
{
    /// <summary><c>peak/above-load</c>: the maximum of irr.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <returns>The peak, A.</returns>
    public static Reading AboveLoad(in RecoveryEvent recovery)
    {
        if (recovery.Reason is not null)
        {
            return Reading.None(recovery.Reason);
        }

        double from = recovery.Start.Reason is null ? recovery.Start.At : recovery.Departure;
        return Reading.Of(recovery.Top.Height, from, recovery.Top.Sample + 1);
    }

    /// <summary><c>peak/parabola-20</c>: the vertex of a parabola over the top fifth, for noisy records.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <returns>The peak, A.</returns>
    public static Reading Parabola(in RecoveryEvent recovery) =>
        recovery.Reason is not null
            ? Reading.None(recovery.Reason)
            : Peak.TopFifth(recovery.Irr, recovery.Departure, recovery.PeakEnd, 0);
}
