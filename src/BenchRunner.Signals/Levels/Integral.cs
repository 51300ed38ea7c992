using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Levels;

/// <summary>Integrals over an interval whose ends lie between samples.</summary>
/// <remarks>
/// The trapezoidal rule, with the part-samples at both ends: between samples a signal, or the product of two, is the
/// straight line that joins them. So integrals over adjacent intervals add up. Summed left to right: the same bits
/// everywhere; with ADC codes behind them, as exact integers scaled at the end. A curvature c between samples costs
/// c · dt²/12 an unit of time.
/// </remarks>
public static class Integral
{
    /// <summary>∫ x over an interval, in units of the sample interval.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="from">Start, in samples; inside the span.</param>
    /// <param name="to">End, in samples; not before <paramref name="from"/>, inside the span.</param>
    /// <returns>The integral; times the sample interval it is in unit·s.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The interval is empty or outside the span.</exception>
    /// <exception cref="ArgumentException">A sample of the interval is NaN or infinite.</exception>
    /// <example>Samples 0, 2 from 0 to 1 give 1.</example>
    public static double Of(ReadOnlySpan<double> samples, double from, double to) =>
        Of(new Samples(samples), from, to);

    /// <inheritdoc cref="Of(ReadOnlySpan{double}, double, double)"/>
    public static double Of(Samples samples, double from, double to)
    {
        Check(samples.Length, from, to);
        double integral = Sum(samples, from, to);
        Finite.Require(integral, samples, from, to, nameof(samples));
        return integral;
    }

    private static double Sum(Samples samples, double from, double to)
    {
        int first = (int)Math.Ceiling(from);
        int last = (int)Math.Floor(to);
        double start = Between(samples.Values, from);
        double end = Between(samples.Values, to);
        if (first > last)
        {
            return (start + end) / 2 * (to - from);
        }

        double sum = (start + samples[first]) / 2 * (first - from);
        sum = samples.HasCodes
            ? sum + Inside(samples, Twice(samples.Codes, first, last), last - first)
            : Inside(samples.Values, first, last, sum);
        return sum + ((samples[last] + end) / 2 * (to - last));
    }

    /// <summary>∫ x·y over an interval, in units of the sample interval.</summary>
    /// <param name="x">One signal, uniform.</param>
    /// <param name="y">The other, on the same grid.</param>
    /// <param name="from">Start, in samples; inside the span.</param>
    /// <param name="to">End, in samples; not before <paramref name="from"/>, inside the span.</param>
    /// <returns>The integral; times the sample interval it is in unit·unit·s.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The interval is empty or outside the span.</exception>
    /// <exception cref="ArgumentException">The spans differ in length, or a sample of the interval is NaN or
    /// infinite.</exception>
    /// <example>x = y = 0, 1 from 0 to 1 gives 1/2.</example>
    public static double OfProduct(ReadOnlySpan<double> x, ReadOnlySpan<double> y, double from, double to) =>
        OfProduct(new Samples(x), new Samples(y), from, to);

    /// <inheritdoc cref="OfProduct(ReadOnlySpan{double}, ReadOnlySpan{double}, double, double)"/>
    public static double OfProduct(Samples x, Samples y, double from, double to)
    {
        if (x.Length != y.Length)
        {
            throw new ArgumentException("Two signals on one grid have one length.", nameof(y));
        }

        Check(x.Length, from, to);
        double integral = Sum(x, y, from, to);
        Finite.Require(integral, x, from, to, nameof(x));
        Finite.Require(integral, y, from, to, nameof(y));
        return integral;
    }

    private static double Sum(Samples x, Samples y, double from, double to)
    {
        int first = (int)Math.Ceiling(from);
        int last = (int)Math.Floor(to);
        double start = Between(x.Values, y.Values, from);
        double end = Between(x.Values, y.Values, to);
        if (first > last)
        {
            return (start + end) / 2 * (to - from);
        }

        double sum = (start + (x[first] * y[first])) / 2 * (first - from);
        sum = x.HasCodes && y.HasCodes
            ? sum + Inside(x, y, first, last)
            : Inside(x.Values, y.Values, first, last, sum);
        return sum + (((x[last] * y[last]) + end) / 2 * (to - last));
    }

    /// <summary>The mean of a signal over an interval: its integral over its length; the value itself where that is
    /// 0.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="from">Start, in samples; inside the span.</param>
    /// <param name="to">End, in samples; not before <paramref name="from"/>, inside the span.</param>
    /// <returns>The mean, in the signal's unit.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The interval is empty or outside the span.</exception>
    /// <exception cref="ArgumentException">A sample of the interval is NaN or infinite.</exception>
    public static double Mean(ReadOnlySpan<double> samples, double from, double to) =>
        Mean(new Samples(samples), from, to);

    /// <inheritdoc cref="Mean(ReadOnlySpan{double}, double, double)"/>
    public static double Mean(Samples samples, double from, double to) =>
        to > from ? Of(samples, from, to) / (to - from) : At(samples.Values, from);

    /// <summary>The value of a signal between samples.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="position">Position, in samples; inside the span.</param>
    /// <returns>The value, in the signal's unit.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The position is outside the span.</exception>
    /// <exception cref="ArgumentException">A sample beside the position is NaN or infinite.</exception>
    public static double At(ReadOnlySpan<double> samples, double position)
    {
        Check(samples.Length, position, position);
        double value = Between(samples, position);
        Finite.Require(value, samples, position, position, nameof(samples));
        return value;
    }

    private static double Between(ReadOnlySpan<double> samples, double position)
    {
        int before = (int)position;
        double part = position - before;
        return part == 0 ? samples[before] : samples[before] + (part * (samples[before + 1] - samples[before]));
    }

    /// <summary>Whole sample intervals of one signal, added to what came before.</summary>
    private static double Inside(ReadOnlySpan<double> samples, int first, int last, double sum)
    {
        for (int i = first; i < last; i++)
        {
            sum += (samples[i] + samples[i + 1]) / 2;
        }

        return sum;
    }

    /// <summary>Whole sample intervals of a product, added to what came before.</summary>
    private static double Inside(ReadOnlySpan<double> x, ReadOnlySpan<double> y, int first, int last, double sum)
    {
        double now = x[first] * y[first];
        for (int i = first; i < last; i++)
        {
            double next = x[i + 1] * y[i + 1];
            sum += (now + next) / 2;
            now = next;
        }

        return sum;
    }

    /// <summary>Whole sample intervals of codes, scaled.</summary>
    private static double Inside(Samples samples, long twice, int intervals) =>
        (samples.Gain * (twice / 2.0)) + (samples.Offset * intervals);

    /// <summary>Whole sample intervals of a product of codes: (a c + b)(d e + f) taken apart, so that only whole
    /// numbers are summed.</summary>
    private static double Inside(Samples x, Samples y, int first, int last)
    {
        ReadOnlySpan<short> a = x.Codes[first..(last + 1)];
        ReadOnlySpan<short> b = y.Codes[first..(last + 1)];
        (long sumX, long sumY, long products) = CodeSums.Products(a, b);
        long twice = (2 * products) - (a[0] * b[0]) - (a[^1] * b[^1]);
        long twiceX = (2 * sumX) - a[0] - a[^1];
        long twiceY = (2 * sumY) - b[0] - b[^1];
        return (x.Gain * y.Gain * (twice / 2.0))
            + (x.Gain * y.Offset * (twiceX / 2.0))
            + (x.Offset * Inside(y, twiceY, last - first));
    }

    /// <summary>Twice the trapezoidal sum of codes over whole sample intervals: a whole number.</summary>
    private static long Twice(ReadOnlySpan<short> codes, int first, int last) =>
        (2 * CodeSums.Sum(codes[first..(last + 1)])) - codes[first] - codes[last];

    private static double Between(ReadOnlySpan<double> x, ReadOnlySpan<double> y, double position)
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
