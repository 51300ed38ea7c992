using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.LoadCurrent;

/// <summary>
/// The load's current through turn-on, iL(t), and its value at turn-on: <c>i_on</c>, definition <c>iload/ramp</c>.
/// </summary>
/// <param name="Knee">Instant at which vds of the firing switch falls through 50 %, in samples: before it the load sees
/// no voltage and its current is taken as constant.</param>
/// <param name="Ramp">The line fitted to the second pulse after the ringing.</param>
/// <param name="From">Start of the fit window, in samples.</param>
/// <param name="To">End of the fit window, in samples.</param>
/// <param name="IsSlopeHeld">Whether the slope was held to the first ramp's.</param>
/// <remarks>
/// Within 0.2 % of the true current in most circuits, some percent off where the load's winding rings or its core
/// saturates: part of the definition, and of its uncertainty. Where off2 is after the record, nothing says how far the
/// pulse goes on, and a record may end amid recovery or ringing, or amid a slope that is not the first ramp's: there
/// the window must be a third as long as what lies between on2 and it, and its two halves on one line, within their
/// noise or 2 % of the current.
/// </remarks>
public readonly record struct LoadLine(double Knee, Line Ramp, double From, double To, bool IsSlopeHeld)
{
    private const double Trail = 0.05;
    private const double ShortestPart = 0.10;
    private const int FewestSamples = 100;
    private const double MostStep = 0.02;
    private const double LeastWindow = 1 / 3.0;
    private const double Noises = 3;

    /// <summary>The current at turn-on, A: <c>i_on</c>.</summary>
    public double OnCurrent => Ramp.At(Knee);

    /// <summary>The load's current at a position, A.</summary>
    /// <param name="position">Position, in samples.</param>
    public double At(double position) => Ramp.At(Math.Max(position, Knee));

    /// <summary>Fits the line.</summary>
    /// <param name="current">Current of the firing switch, A, uniform, offset removed, finite.</param>
    /// <param name="on2">50 % crossing of on2, in samples.</param>
    /// <param name="off2">50 % crossing of off2, in samples; null: after the record.</param>
    /// <param name="knee">Instant at which vds falls through 50 %, in samples.</param>
    /// <param name="start">Start of the fit window, in samples: the ringing has decayed, the recovery is over.</param>
    /// <param name="firstSlope">Slope of the first ramp, A a sample, to which a short window is held; null:
    /// none.</param>
    /// <param name="noise">Standard deviation of the current's noise, A.</param>
    /// <param name="reason">Why there is no line; null where there is one.</param>
    /// <returns>The line; default where there is none.</returns>
    public static LoadLine Fit(
        Samples current,
        double on2,
        double? off2,
        double knee,
        double start,
        double? firstSlope,
        double noise,
        out string? reason)
    {
        reason = null;
        double end = off2 ?? (current.Length - 1);
        double pulse = end - on2;
        double to = off2 is null ? end : end - (Trail * pulse);
        bool held = off2 is null || to - start < Math.Max(FewestSamples, ShortestPart * pulse);
        if (held && firstSlope is null)
        {
            reason = "the second pulse is too short for a slope of its own, and the first ramp has none";
            return default;
        }

        if (Line.Fit(current, start, to, held ? firstSlope : null) is not { } line)
        {
            reason = "the second pulse ends before ringing and recovery are over";
            return default;
        }

        LoadLine found = new(knee, line, start, to, held);
        if (off2 is null && (to - start < LeastWindow * (start - on2) || !found.IsOneLine(current, noise)))
        {
            reason = "the record ends before the current follows the load's ramp";
            return default;
        }

        return found;
    }

    /// <summary>The current at turn-on as a reading.</summary>
    public Reading ToReading() => Reading.Of(OnCurrent, From, To);

    /// <summary>Whether both halves of the window lie on one line of the held slope.</summary>
    private bool IsOneLine(Samples current, double noise)
    {
        double middle = (From + To) / 2;
        if (Line.Fit(current, From, Math.BitDecrement(middle), Ramp.Slope) is not { } early
            || Line.Fit(current, middle, To, Ramp.Slope) is not { } late)
        {
            return false;
        }

        double step = Math.Abs(late.At(middle) - early.At(middle));
        double chance = Noises * noise * 2 / Math.Sqrt(Math.Max(1, To - From));
        return step <= Math.Max(chance, MostStep * Math.Abs(OnCurrent));
    }
}
