using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Levels;

/// <summary>Bus voltage at the second turn-on, V: <c>bus_voltage</c>.</summary>
public static class BusVoltage
{
    // Long enough to average noise, short enough not to see the gap's own slope.
    private const double Window = 200e-9;

    /// <summary><c>levels/window</c>: the mean of a channel in the 200 ns before an edge's departure.</summary>
    /// <param name="samples">The channel, V, uniform.</param>
    /// <param name="dt">Sample interval, s; above 0.</param>
    /// <param name="departure">Departure of the edge, in samples; inside the record.</param>
    /// <returns>The mean, V, over the 200 ns or what the record holds of them.</returns>
    /// <example>800 V falling by 0.02 V/ns, departure at 2 ns: 801.96 V.</example>
    public static Reading Before(Samples samples, double dt, double departure)
    {
        double from = Math.Max(0, departure - (Window / dt));
        return departure - from >= 1
            ? Reading.Of(Integral.Mean(samples, from, departure), from, departure)
            : Reading.None("the record begins too late");
    }

    /// <summary><c>levels/window-vds</c>: where vbus is not measured, the switch's voltage in the gap less what the
    /// freewheeling diode adds to it.</summary>
    /// <param name="blocked">Mean voltage of the blocking switch before on2, V.</param>
    /// <param name="forwardVoltage">Stated forward voltage of the diode, V; null: not stated.</param>
    /// <returns>The bus voltage, V.</returns>
    public static Reading FromBlocking(Reading blocked, double? forwardVoltage) =>
        !blocked.HasValue ? blocked
        : forwardVoltage is { } forward ? Reading.Of(blocked.Value - forward, blocked.From, blocked.To)
        : Reading.None("vbus is not measured and the diode's forward voltage is not stated");
}
