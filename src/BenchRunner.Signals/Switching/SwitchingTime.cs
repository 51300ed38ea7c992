using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Switching;

/// <summary>
/// Switching times, s: <c>td_on</c>, <c>tr</c>, <c>td_off</c>, <c>tf</c>. Of a MOSFET by its voltage (IEC 60747-8), of
/// an IGBT by its current (IEC 60747-9).
/// </summary>
/// <remarks>
/// The rise and fall times of a MOSFET are those of the voltage seen from the gate: <c>tr</c> is where vds falls. A
/// delay counts from the gate's departure, so a plateau below 50 % does no harm. An inductive dip can leave a level
/// undecided.
/// </remarks>
public static class SwitchingTime
{
    /// <summary><c>mos/10-90</c> of td_on and <c>mos/90-10</c> of td_off: from the gate's departure until vds has left
    /// its state by 10 %.</summary>
    /// <param name="edge">The turn-on or turn-off.</param>
    /// <returns>The delay, s.</returns>
    public static Reading VoltageDelay(in SwitchingEvent edge) =>
        Since(edge, edge.Voltage(edge.TurnsOn ? 0.9 : 0.1, decided: true));

    /// <summary><c>igbt/10-10</c> of td_on and <c>igbt/90-90</c> of td_off: from the gate's departure until the current
    /// has left its state by 10 %.</summary>
    /// <param name="edge">The turn-on or turn-off.</param>
    /// <returns>The delay, s.</returns>
    public static Reading CurrentDelay(in SwitchingEvent edge) => Since(edge, edge.CurrentAt(edge.TurnsOn ? 0.1 : 0.9));

    /// <summary><c>mos/90-10</c> of tr and <c>mos/10-90</c> of tf: vds between 90 % and 10 %.</summary>
    /// <param name="edge">The turn-on or turn-off.</param>
    /// <returns>The time, s.</returns>
    public static Reading VoltageTransition(in SwitchingEvent edge) =>
        Between(edge, edge.Voltage(edge.TurnsOn ? 0.9 : 0.1, true), edge.Voltage(edge.TurnsOn ? 0.1 : 0.9, true));

    /// <summary><c>igbt/10-90</c> of tr and <c>igbt/90-10</c> of tf: the current between 10 % and 90 % of the
    /// load's.</summary>
    /// <param name="edge">The turn-on or turn-off.</param>
    /// <returns>The time, s.</returns>
    public static Reading CurrentTransition(in SwitchingEvent edge) =>
        Between(edge, edge.CurrentAt(edge.TurnsOn ? 0.1 : 0.9), edge.CurrentAt(edge.TurnsOn ? 0.9 : 0.1));

    private static Reading Since(in SwitchingEvent edge, Instant end) => Between(edge, Instant.Of(edge.Departure), end);

    private static Reading Between(in SwitchingEvent edge, Instant start, Instant end)
    {
        if ((start.Reason ?? end.Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        return end.At > start.At
            ? Reading.Of((end.At - start.At) * edge.SampleInterval, start.At, end.At)
            : Reading.None("the levels are crossed in the wrong order");
    }
}
