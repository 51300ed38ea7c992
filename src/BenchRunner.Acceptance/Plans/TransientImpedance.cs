using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Plans;

/// <summary>The transient thermal impedance between the points that a sequence states.</summary>
public static class TransientImpedance
{
    /// <summary>Thermal impedance at a pulse time, K/W: by the logarithm of time between the points stated.</summary>
    /// <param name="impedance">Points by rising time; the steady one has infinite time.</param>
    /// <param name="time">Time since the power began, s; 0 or less gives 0.</param>
    /// <returns>
    /// Before the first point it falls with the square root of time (heat into a half-space, common practice). The
    /// steady value counts from a hundred times the last stated time on.
    /// </returns>
    /// <exception cref="ArgumentException">No point.</exception>
    public static double At(IReadOnlyList<ThermalPoint> impedance, double time)
    {
        ArgumentNullException.ThrowIfNull(impedance);
        if (impedance.Count == 0)
        {
            throw new ArgumentException("at least one point is needed", nameof(impedance));
        }

        if (time <= 0)
        {
            return 0;
        }

        ThermalPoint first = impedance[0];
        if (double.IsPositiveInfinity(first.Time))
        {
            return first.Impedance;
        }

        if (time <= first.Time)
        {
            return first.Impedance * Math.Sqrt(time / first.Time);
        }

        ThermalPoint before = first;
        foreach (ThermalPoint point in impedance.Skip(1))
        {
            double at = double.IsPositiveInfinity(point.Time) ? 100 * before.Time : point.Time;
            if (time <= at)
            {
                double part = Math.Log(time / before.Time) / Math.Log(at / before.Time);
                return before.Impedance + (part * (point.Impedance - before.Impedance));
            }

            before = point;
        }

        return before.Impedance;
    }
}
