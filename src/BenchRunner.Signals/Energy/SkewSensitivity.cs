using BenchRunner.Signals.Levels;

namespace BenchRunner.Signals.Energy;

/// <summary>How an energy changes with the skew between voltage and current, W (J a second of skew).</summary>
public static class SkewSensitivity
{
    /// <summary>The change of ∫ v i dt over an interval when the current is recorded later, per second of
    /// delay.</summary>
    /// <param name="voltage">Voltage, V, uniform.</param>
    /// <param name="current">Current, A, on the same grid.</param>
    /// <param name="dt">Sample interval, s; above 0.</param>
    /// <param name="from">Start of the interval, in samples; inside the record.</param>
    /// <param name="to">End of the interval, in samples.</param>
    /// <param name="fromMoves">Whether the interval's start is a crossing of the current, and so moves with it.</param>
    /// <param name="toMoves">Whether its end is.</param>
    /// <returns>dE/dδ = −∫ v (di/dt) dt, and where an end moves with the current ± v i there, W.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The interval is outside the record.</exception>
    /// <exception cref="ArgumentException">The spans differ in length, or a sample of the interval is NaN or
    /// infinite.</exception>
    /// <remarks>To first order, for an edge without recovery, −V I at turn-on and +V I at turn-off: 80 µJ/ns at 800 V
    /// and 100 A; with recovery it is more.</remarks>
    public static double Form(
        ReadOnlySpan<double> voltage,
        ReadOnlySpan<double> current,
        double dt,
        double from,
        double to,
        bool fromMoves,
        bool toMoves)
    {
        if (voltage.Length != current.Length)
        {
            throw new ArgumentException("Two signals on one grid have one length.", nameof(current));
        }

        // By parts on straight lines: −∫ v di = ∫ i dv − [v i], each segment exact.
        double sum = 0;
        double v0 = Integral.At(voltage, from);
        double i0 = Integral.At(current, from);
        double position = from;
        double power = v0 * i0;
        while (position < to)
        {
            double next = Math.Min(to, Math.Floor(position) + 1);
            double v1 = Integral.At(voltage, next);
            double i1 = Integral.At(current, next);
            sum -= (v0 + v1) / 2 * (i1 - i0);
            (position, v0, i0) = (next, v1, i1);
        }

        return sum - (fromMoves ? power : 0) + (toMoves ? v0 * i0 : 0);
    }
}
