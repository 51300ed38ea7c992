using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Levels;

/// <summary>On-state voltage of the switch, V: <c>vds_on</c>, definition <c>levels/window</c>.</summary>
public static class OnState
{
    private const double Part = 0.10;

    /// <summary>The mean of vds over the last tenth of a pulse, ending at the departure of its turn-off.</summary>
    /// <param name="vds">Voltage of the switch, V, uniform.</param>
    /// <param name="on">50 % crossing of the turn-on, in samples; 0 where the record begins inside the pulse.</param>
    /// <param name="off">50 % crossing of the turn-off, in samples.</param>
    /// <param name="departure">Departure of the turn-off, in samples.</param>
    /// <returns>The level, V.</returns>
    /// <remarks>A window, not a histogram: the on state ramps with the current. A probe that recovers slowly from the
    /// blocking voltage reads too high in a short pulse.</remarks>
    public static Reading Form(Samples vds, double on, double off, double departure)
    {
        double from = Math.Max(0, departure - (Part * (off - on)));
        return departure > from && departure <= vds.Length - 1
            ? Reading.Of(Integral.Mean(vds, from, departure), from, departure)
            : Reading.None("the pulse is too short");
    }
}
