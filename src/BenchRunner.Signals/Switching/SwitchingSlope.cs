using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Switching;

/// <summary>Mean slopes of an edge, as magnitudes: <c>dvdt_on</c>, <c>dvdt_off</c>, V/s; <c>didt_on</c>,
/// <c>didt_off</c>, A/s.</summary>
/// <remarks>The straight line between two crossings, not the steepest slope: that one is mostly noise and
/// bandwidth.</remarks>
public static class SwitchingSlope
{
    /// <summary><c>slope/20-80</c> and <c>slope/10-90</c> of vds.</summary>
    /// <param name="edge">The turn-on or turn-off.</param>
    /// <param name="low">The lower level as a fraction of the step, e.g. 0.2.</param>
    /// <returns>Magnitude of the mean slope between the level and its mirror image, V/s.</returns>
    public static Reading Voltage(in SwitchingEvent edge, double low)
    {
        Instant first = edge.Voltage(edge.TurnsOn ? 1 - low : low, decided: true);
        Instant second = edge.Voltage(edge.TurnsOn ? low : 1 - low, decided: true);
        return Mean(edge, (1 - (2 * low)) * edge.Step, first, second);
    }

    /// <summary><c>slope/10-90</c> of didt_on, <c>slope/90-10</c> of didt_off.</summary>
    /// <param name="edge">The turn-on or turn-off.</param>
    /// <returns>Magnitude of the mean slope of the current between 10 % and 90 % of the load's, A/s.</returns>
    public static Reading Current(in SwitchingEvent edge)
    {
        Instant first = edge.CurrentAt(edge.TurnsOn ? 0.1 : 0.9);
        Instant second = edge.CurrentAt(edge.TurnsOn ? 0.9 : 0.1);
        return Mean(edge, 0.8 * edge.Current.Value, first, second);
    }

    private static Reading Mean(in SwitchingEvent edge, double change, Instant first, Instant second)
    {
        if ((first.Reason ?? second.Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        return second.At > first.At
            ? Reading.Of(change / ((second.At - first.At) * edge.SampleInterval), first.At, second.At)
            : Reading.None("the levels are crossed in the wrong order");
    }
}
