using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Recovery;

/// <summary>Reverse recovery charge, C: <c>qrr</c>, what the diode gives back after its current has crossed
/// zero.</summary>
/// <remarks>
/// Qrr = ∫ irr dt from t0 to an end that is part of the ID. Contains the charge of the output capacitance: for a fast
/// device that is most of it. Source: IEC 60747-2 (recovered charge, integration time).
/// </remarks>
public static class RecoveryCharge
{
    /// <summary><c>qrr/chord-90-25</c> and <c>qrr/fall-N</c>: to the end by which trr is formed.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="end">The end.</param>
    /// <returns>The charge, C.</returns>
    /// <example>A triangle of 40 A over 35 ns holds 700 nC.</example>
    public static Reading UntilEnd(in RecoveryEvent recovery, Instant end)
    {
        if ((recovery.Reason ?? recovery.Start.Reason ?? end.Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        double start = recovery.Start.At;
        if (end.At > recovery.Irr.Length - 1)
        {
            return Reading.None("the window ends before the recovery");
        }

        return end.At >= start
            ? Reading.Of(Integral.Of(recovery.Irr, start, end.At) * recovery.SampleInterval, start, end.At)
            : Reading.None("the interval ends before it begins");
    }

    /// <summary><c>qrr/to-zero</c>: until irr first reaches zero after the peak.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <returns>The charge, C.</returns>
    public static Reading UntilZero(in RecoveryEvent recovery)
    {
        if (recovery.Reason is not null)
        {
            return Reading.None(recovery.Reason);
        }

        Instant end = Crossing.FirstAtOrBelow(
            recovery.Irr, 0, recovery.Top.Sample, recovery.Irr.Length - 1) is { } at
            ? Instant.Of(at)
            : Instant.None("irr does not come back to zero");
        return UntilEnd(recovery, end);
    }

    /// <summary><c>qrr/window-T</c>: over a stated time from t0.</summary>
    /// <param name="recovery">The recovery.</param>
    /// <param name="time">The integration time T, s; above 0.</param>
    /// <returns>The charge, C.</returns>
    public static Reading OverTime(in RecoveryEvent recovery, double time) =>
        UntilEnd(recovery, Instant.Of(recovery.Start.At + (time / recovery.SampleInterval)));
}
