using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Energy;

/// <summary>Energy lost in the switch in one edge, J: <c>eon</c>, <c>eoff</c>, definitions <c>e/10-10</c> and
/// <c>e/10-2</c>.</summary>
/// <remarks>
/// ∫ vds · id dt. Turn-on: from id = 10 % of i_on to vds = 10 % (2 %) of its step. Turn-off: from vds = 10 % of its
/// step to id = 10 % (2 %) of i_off. The limits of IEC 60747-8 and -9 could not be verified in the standards' own text:
/// they are part of the ID. A current late by δ changes eon by −V I δ and eoff by +V I δ to first order, 80 µJ/ns at
/// 800 V and 100 A.
/// </remarks>
public static class SwitchingEnergy
{
    /// <summary>The energy of an edge.</summary>
    /// <param name="edge">The turn-on or turn-off.</param>
    /// <param name="end">Level at which the integral ends, as a fraction: of vds at turn-on, of the current at
    /// turn-off; 0.10 or 0.02.</param>
    /// <returns>The energy, J.</returns>
    /// <example>800 V, 100 A, 20 ns of current rise, then 30 ns of voltage fall: 1.98 mJ by <c>e/10-10</c>.</example>
    public static Reading Form(in SwitchingEvent edge, double end)
    {
        Instant from = edge.TurnsOn ? edge.CurrentAt(0.1) : edge.Voltage(0.1, decided: false);
        Instant to = edge.TurnsOn ? edge.Voltage(end, decided: false) : edge.CurrentAt(end);
        if ((from.Reason ?? to.Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        return to.At > from.At
            ? Reading.Of(
                Integral.OfProduct(edge.Vds, edge.Id, from.At, to.At) * edge.SampleInterval, from.At, to.At)
            : Reading.None("the interval ends before it begins");
    }
}
