using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Peaks;

/// <summary>Peak current of the switch at turn-on, A: <c>id_peak_on</c>, load and recovery current together.</summary>
public static class TurnOnPeak
{
    /// <summary><c>peak/raw</c>: the maximum of id after on2.</summary>
    /// <param name="id">Current of the switch, A, uniform.</param>
    /// <param name="from">Departure of on2, in samples.</param>
    /// <param name="to">The next edge, or the record's end, in samples.</param>
    /// <returns>The peak, A.</returns>
    /// <remarks>A long second pulse with little recovery has its maximum at the end of the load's ramp.</remarks>
    public static Reading Raw(ReadOnlySpan<double> id, double from, double to) =>
        TurnOffPeak.Top(Peak.Raw(id, from, to), from);
}
