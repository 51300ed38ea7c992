namespace BenchRunner.Signals.Levels;

/// <summary>Integrals over an interval whose ends lie between samples.</summary>
/// <remarks>
/// The trapezoidal rule, with the part-samples at both ends: between samples a signal, or the product of two, is the
/// straight line that joins them. So integrals over adjacent intervals add up. Summed left to right: the same bits
/// everywhere. A curvature c between samples costs c · dt²/12 an unit of time.
/// </remarks>
public static class Integral
{
    /// <summary>∫ x over an interval, in units of the sample interval.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="from">Start, in samples; inside the span.</param>
    /// <param name="to">End, in samples; not before <paramref name="from"/>, inside the span.</param>
    /// <returns>The integral; times the sample interval it is in unit·s.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The interval is empty or outside the span.</exception>
    /// <example>Samples 0, 2 from 0 to 1 give 1.</example>
    public static double Of(ReadOnlySpan<double> samples, double from, double to)
    {
        Check(samples.Length, from, to);
        int first = (int)Math.Ceiling(from);
        int last = (int)Math.Floor(to);
        double start = At(samples, from);
        double end = At(samples, to);
        if (first > last)
        {
            return (start + end) / 2 * (to - from);
        }

        double sum = (start + samples[first]) / 2 * (first - from);
        for (int i = first; i < last; i++)
        {
            sum += (samples[i] + samples[i + 1]) / 2;
        }

        return sum + ((samples[last] + end) / 2 * (to - last));
    }

    /// <summary>∫ x·y over an interval, in units of the sample interval.</summary>
    /// <param name="x">One signal, uniform.</param>
    /// <param name="y">The other, on the same grid.</param>
    /// <param name="from">Start, in samples; inside the span.</param>
    /// <param name="to">End, in samples; not before <paramref name="from"/>, inside the span.</param>
    /// <returns>The integral; times the sample interval it is in unit·unit·s.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The interval is empty or outside the span.</exception>
    /// <exception cref="ArgumentException">The spans differ in length.</exception>
    /// <example>x = y = 0, 1 from 0 to 1 gives 1/2.</example>
    public static double OfProduct(ReadOnlySpan<double> x, ReadOnlySpan<double> y, double from, double to)
    {
        if (x.Length != y.Length)
        {
            throw new ArgumentException("Two signals on one grid have one length.", nameof(y));
        }

        Check(x.Length, from, to);
        int first = (int)Math.Ceiling(from);
        int last = (int)Math.Floor(to);
        double start = At(x, y, from);
        double end = At(x, y, to);
        if (first > last)
        {
            return (start + end) / 2 * (to - from);
        }

        double now = x[first] * y[first];
        double sum = (start + now) / 2 * (first - from);
        for (int i = first; i < last; i++)
        {
            double next = x[i + 1] * y[i + 1];
            sum += (now + next) / 2;
            now = next;
        }

        return sum + ((now + end) / 2 * (to - last));
    }

    /// <summary>The mean of a signal over an interval: its integral over its length; the value itself where that is
    /// 0.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="from">Start, in samples; inside the span.</param>
    /// <param name="to">End, in samples; not before <paramref name="from"/>, inside the span.</param>
    /// <returns>The mean, in the signal's unit.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The interval is empty or outside the span.</exception>
    public static double Mean(ReadOnlySpan<double> samples, double from, double to) =>
        to > from ? Of(samples, from, to) / (to - from) : At(samples, from);

    /// <summary>The value of a signal between samples.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="position">Position, in samples; inside the span.</param>
    /// <returns>The value, in the signal's unit.</returns>
    public static double At(ReadOnlySpan<double> samples, double position)
    {
        int before = (int)position;
        double part = position - before;
        return part == 0 ? samples[before] : samples[before] + (part * (samples[before + 1] - samples[before]));
    }

    private static double At(ReadOnlySpan<double> x, ReadOnlySpan<double> y, double position)
    {
        int before = (int)position;
        double part = position - before;
        double product = x[before] * y[before];
        return part == 0 ? product : product + (part * ((x[before + 1] * y[before + 1]) - product));
    }

    private static void Check(int length, double from, double to)
    {
        if (!(from >= 0 && from <= to && to <= length - 1))
        {
            throw new ArgumentOutOfRangeException(
                nameof(from), $"[{from}, {to}] is not an interval of 0 … {length - 1}.");
        }
    }
}
