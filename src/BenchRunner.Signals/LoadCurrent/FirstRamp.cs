using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.LoadCurrent;

/// <summary>
/// The load current's ramp in the first pulse: <c>ramp_slope</c>, <c>ramp_straightness</c>, <c>i_off</c>, definition
/// <c>iload/ramp</c>.
/// </summary>
/// <remarks>
/// A load inductor on a constant bus gives i = a + b t. The fit window leaves out the first 30 % of the pulse (ringing,
/// winding capacitance) and the last 5 %.
/// </remarks>
public sealed class FirstRamp
{
    /// <summary>Parts of the fit window over which residuals are averaged, so that noise peaks do not count.</summary>
    public const int Parts = 20;

    private const double Lead = 0.30;
    private const double Trail = 0.05;

    private FirstRamp(Reading slope, Reading straightness, Reading offCurrent, Reading growth)
    {
        Slope = slope;
        Straightness = straightness;
        OffCurrent = offCurrent;
        Growth = growth;
    }

    /// <summary>Slope b of the ramp, A/s.</summary>
    public Reading Slope { get; }

    /// <summary>Largest |mean residual| of the parts of the window over the current at off1, 1.</summary>
    public Reading Straightness { get; }

    /// <summary>The fitted current at off1's 50 % crossing, A.</summary>
    public Reading OffCurrent { get; }

    /// <summary>Slope of the last quarter of the window over that of its first third, less 1; 0 for a straight
    /// ramp.</summary>
    public Reading Growth { get; }

    /// <summary>Fits the ramp.</summary>
    /// <param name="current">Current of the firing switch, A, uniform, offset removed, finite.</param>
    /// <param name="dt">Sample interval, s; above 0.</param>
    /// <param name="on1">50 % crossing of on1, in samples; null: before the record, the fit then begins at its
    /// start.</param>
    /// <param name="off1">50 % crossing of off1, in samples.</param>
    /// <param name="departure">Departure of off1, in samples.</param>
    /// <param name="parts">Parts of the window for the straightness.</param>
    /// <returns>The four readings, each with its own reason where it cannot be formed.</returns>
    /// <remarks>Source: least squares; a saturating inductor bends the ramp upwards, a slipping current limit
    /// downwards.
    /// </remarks>
    /// <example>0.3 A + 5 A/µs · t, pulse 0 to 5 µs: 5 A/µs, 0, 25.3 A.</example>
    public static FirstRamp Fit(
        Samples current, double dt, double? on1, double off1, double departure, int parts = Parts)
    {
        double pulse = off1 - (on1 ?? 0);
        double from = on1 is null ? 0 : on1.Value + (Lead * pulse);
        double to = departure - (Trail * pulse);
        if (Line.Fit(current, from, to) is not { } line)
        {
            return Without("the first pulse is too short for a fit");
        }

        double off = line.At(off1);
        Reading growth = Reading.None("the first pulse is too short for slopes of its parts");
        if (Line.Fit(current, from, from + ((to - from) / 3)) is { } early
            && Line.Fit(current, to - ((to - from) / 4), to) is { } late)
        {
            growth = Reading.Of((late.Slope / early.Slope) - 1, from, to);
        }

        return new FirstRamp(
            Reading.Of(line.Slope / dt, from, to),
            Reading.Of(LargestResidual(current, line, from, to, parts) / Math.Abs(off), from, to),
            Reading.Of(off, from, to),
            growth);
    }

    /// <summary>No ramp, and why.</summary>
    internal static FirstRamp Without(string reason)
    {
        Reading none = Reading.None(reason);
        return new FirstRamp(none, none, none, none);
    }

    private static double LargestResidual(Samples current, Line line, double from, double to, int parts)
    {
        int first = Math.Max(0, (int)Math.Ceiling(from));
        int count = (int)Math.Min(current.Length - 1, Math.Floor(to)) - first + 1;
        double largest = 0;
        for (int part = 0; part < parts; part++)
        {
            int start = first + (int)((long)count * part / parts);
            int end = first + (int)((long)count * (part + 1) / parts);
            // A line of the same slope through the part lies off by the part's mean residual.
            if (Line.Fit(current, start, end - 1, line.Slope) is { } mean)
            {
                largest = Math.Max(largest, Math.Abs(mean.Value - line.At(mean.Centre)));
            }
        }

        return largest;
    }
}
