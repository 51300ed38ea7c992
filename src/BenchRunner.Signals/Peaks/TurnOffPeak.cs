using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Peaks;

/// <summary>Peak voltage of the switch at turn-off, V: <c>vds_peak_off</c> and <c>vds_overshoot_off</c>.</summary>
/// <remarks>The probe's bandwidth takes some percent off; only voltage at the probe's own terminals is seen.</remarks>
public static class TurnOffPeak
{
    /// <summary><c>peak/raw</c>: the maximum of vds after off1.</summary>
    /// <param name="vds">Voltage of the switch, V, uniform.</param>
    /// <param name="from">Departure of off1, in samples.</param>
    /// <param name="to">The next edge, or the record's end, in samples.</param>
    /// <returns>The peak, V.</returns>
    public static Reading Raw(ReadOnlySpan<double> vds, double from, double to) => Top(Peak.Raw(vds, from, to), from);

    /// <summary><c>vds_overshoot_off</c>: the peak above the bus.</summary>
    /// <param name="peak">The peak.</param>
    /// <param name="bus">Bus voltage, V.</param>
    /// <returns>The overshoot, V.</returns>
    public static Reading Overshoot(Reading peak, Reading bus)
    {
        if ((peak.Reason ?? bus.Because("bus_voltage").Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        return Reading.Of(peak.Value - bus.Value, peak.From, peak.To);
    }

    /// <summary>What stands in for the bus where it is not measured: the mean of vds over the last third of the ring's
    /// window (the bus rises in the gap, so no later).</summary>
    /// <param name="vds">Voltage of the switch, V, uniform.</param>
    /// <param name="windowFrom">Start of the ring's window, in samples.</param>
    /// <param name="windowTo">End of the ring's window, in samples.</param>
    /// <returns>The level, V.</returns>
    public static Reading Settled(Samples vds, double windowFrom, double windowTo)
    {
        double from = windowTo - ((windowTo - windowFrom) / 3);
        return Reading.Of(Integral.Mean(vds, from, windowTo), from, windowTo);
    }

    /// <summary>A peak as a reading over the interval in which it was looked for.</summary>
    internal static Reading Top(Peak? peak, double from) => peak is { } top
        ? Reading.Of(top.Height, from, top.Sample + 1)
        : Reading.None("no maximum inside the window");
}
