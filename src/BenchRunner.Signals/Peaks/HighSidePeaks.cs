using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Peaks;

/// <summary>The first maxima of the diode's voltage after on2, V: <c>vds_high_peak_1</c> to <c>_3</c>, definition
/// <c>peak/ring</c>.</summary>
public static class HighSidePeaks
{
    private const double ProminencePart = 0.005;
    private const double ProminenceNoise = 5;

    /// <summary>The n-th maximum above the bus that stands out.</summary>
    /// <param name="vdsHigh">Voltage of the freewheeling position, V, uniform.</param>
    /// <param name="bus">Bus voltage, V.</param>
    /// <param name="sigma">Noise of the voltage (σ), V.</param>
    /// <param name="from">Departure of on2, in samples.</param>
    /// <param name="to">The next edge, or the record's end, in samples.</param>
    /// <param name="number">Which maximum: 1, 2 or 3.</param>
    /// <returns>Its height by the parabola through three samples, V.</returns>
    /// <remarks>A maximum counts when it lies above the bus and its prominence is at least max(5 σ, 0.5 % of the bus):
    /// noise and a second mode would be counted otherwise.</remarks>
    public static Reading Form(
        ReadOnlySpan<double> vdsHigh, Reading bus, double sigma, double from, double to, int number)
    {
        if (!bus.HasValue)
        {
            return bus.Because("bus_voltage");
        }

        double prominence = Math.Max(ProminenceNoise * sigma, ProminencePart * Math.Abs(bus.Value));
        Extremes maxima = new(vdsHigh, prominence, minima: false, (int)Math.Ceiling(from), (int)Math.Floor(to));
        int found = 0;
        while (maxima.Next())
        {
            if (vdsHigh[maxima.Sample] > bus.Value && ++found == number)
            {
                Peak peak = Peak.Vertex(vdsHigh, maxima.Sample);
                return Reading.Of(peak.Height, maxima.Sample - 1, maxima.Sample + 1);
            }
        }

        return Reading.None($"only {found} maxima above the bus stand out");
    }
}
