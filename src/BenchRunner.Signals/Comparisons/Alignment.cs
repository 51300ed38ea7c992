using System.Numerics;
using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>Where a reference lies under a measured stretch so that both agree best in shape.</summary>
/// <param name="Shift">By how many samples of the measured record the measured one is later than the reference.</param>
/// <param name="Correlation">Correlation coefficient there: 1 where one is the other but for gain and offset.</param>
/// <remarks>Size and level do not move the result: means are taken off, and each overlap is scaled by its own
/// size.</remarks>
public readonly record struct Alignment(double Shift, double Correlation)
{
    // Where less than this part of the shorter one lies on the other, chance decides.
    private const double FewestPart = 0.5;
    private const int FewestSamples = 16;
    private const double FinestStep = 1e-3;

    // A coefficient that is larger by less than this is no better: a whole shift stays whole.
    private const double Rounding = 1e-13;

    /// <summary>Finds the shift that maximises the cross-correlation.</summary>
    /// <param name="measured">The measured stretch, uniform, finite.</param>
    /// <param name="reference">The whole reference, uniform, finite.</param>
    /// <param name="start">Position in the reference of the first measured sample at no shift.</param>
    /// <param name="step">Samples of the reference for one of the measured record; above 0.</param>
    /// <param name="guess">About where the shift lies, in measured samples.</param>
    /// <param name="reach">How far around it is sought, in measured samples.</param>
    /// <returns>The alignment; null where the largest correlation lies at the end of the reach, or one of the two is
    /// flat.</returns>
    /// <exception cref="ArgumentException">A sample that is looked at is NaN or infinite.</exception>
    /// <remarks>
    /// Whole samples first; then a parabola through the correlation at three shifts around the best one, the reference
    /// interpolated by six points, again and again with shifts closer together (to a thousandth of a sample).
    /// </remarks>
    public static Alignment? Find(
        ReadOnlySpan<double> measured,
        ReadOnlySpan<double> reference,
        double start,
        double step,
        double guess,
        int reach)
    {
        Finite.Require(measured, nameof(measured));
        double[] moved = new double[measured.Length + (2 * reach)];
        (int first, int end) = Resample(reference, start - ((reach + guess) * step), step, moved);
        Finite.Require(moved, nameof(reference));
        int fewest = Fewest(measured, reference, step);
        double best = double.NegativeInfinity;
        int at = 0;
        for (int k = -reach; k <= reach; k++)
        {
            double here = Correlate(measured, moved, first, end, reach - k, fewest);
            (best, at) = here > best ? (here, k) : (best, at);
        }

        return best > 0 && Math.Abs(at) < reach
            ? Refine(measured, reference, start, step, new Alignment(guess + at, best))
            : null;
    }

    /// <summary>The reference under each measured sample.</summary>
    /// <param name="reference">The whole reference.</param>
    /// <param name="start">Position in the reference of the first sample.</param>
    /// <param name="step">Samples of the reference from one to the next.</param>
    /// <param name="values">Receives the values; untouched where the reference holds none.</param>
    /// <returns>The first sample that the reference covers, and the one after the last.</returns>
    public static (int First, int End) Resample(
        ReadOnlySpan<double> reference, double start, double step, Span<double> values)
    {
        (int first, int end) = Covered(reference.Length, start, step, values.Length);
        for (int i = first; i < end; i++)
        {
            values[i] = SkewCorrection.At(reference, start + (i * step));
        }

        return (first, end);
    }

    /// <summary>Which of some samples a reference covers.</summary>
    /// <param name="length">Samples of the reference.</param>
    /// <param name="start">Position in the reference of the first sample.</param>
    /// <param name="step">Samples of the reference from one to the next.</param>
    /// <param name="count">How many samples.</param>
    /// <returns>The first sample that is covered, and the one after the last.</returns>
    public static (int First, int End) Covered(int length, double start, double step, int count)
    {
        // A hair of rounding in the times must not lose the first or last sample.
        const double hair = 1e-6;
        int first = (int)Math.Clamp(Math.Ceiling((-start / step) - hair), 0, count);
        int end = (int)Math.Clamp(Math.Floor(((length - 1 - start) / step) + hair) + 1, first, count);
        return (first, end);
    }

    /// <summary>About where the shift lies, where nothing else says so.</summary>
    /// <param name="measured">The measured stretch, uniform, finite.</param>
    /// <param name="reference">The whole reference, uniform, finite.</param>
    /// <param name="start">Position in the reference of the first measured sample at no shift.</param>
    /// <param name="step">Samples of the reference for one of the measured record; above 0.</param>
    /// <returns>The shift in measured samples; null where one of the two is empty or flat.</returns>
    /// <remarks>The largest of the cross-correlation of both whole, means taken off, by spectra padded with
    /// zeros.</remarks>
    public static double? Guess(
        ReadOnlySpan<double> measured, ReadOnlySpan<double> reference, double start, double step)
    {
        int count = (int)Math.Floor((reference.Length - 1) / step) + 1;
        double[] moved = new double[Math.Max(count, 1)];
        Resample(reference, 0, step, moved);
        int size = (int)BitOperations.RoundUpToPowerOf2((uint)(measured.Length + moved.Length));
        Complex[] a = Padded(measured, size), b = Padded(moved, size);
        for (int k = 0; k < size; k++)
        {
            a[k] *= Complex.Conjugate(b[k]);
        }

        double[] correlation = Spectrum.Back(a);
        int best = 0;
        for (int k = 1; k < size; k++)
        {
            best = correlation[k] > correlation[best] ? k : best;
        }

        // Sample i lies on sample i − lag of the reference, which is at its position start + i · step at no shift.
        int lag = best < measured.Length ? best : best - size;
        return correlation[best] > 0 ? (start / step) + lag : null;
    }

    private static Complex[] Padded(ReadOnlySpan<double> samples, int size)
    {
        double[] padded = new double[size];
        double mean = Mean(samples);
        for (int i = 0; i < samples.Length; i++)
        {
            padded[i] = samples[i] - mean;
        }

        return Spectrum.Of(padded);
    }

    private static Alignment Refine(
        ReadOnlySpan<double> measured, ReadOnlySpan<double> reference, double start, double step, Alignment whole)
    {
        Alignment best = whole;
        double centre = whole.Shift;
        for (double h = 0.5; h > FinestStep; h /= 4)
        {
            double before = At(measured, reference, start, step, centre - h);
            double here = At(measured, reference, start, step, centre);
            double after = At(measured, reference, start, step, centre + h);
            double bend = before - (2 * here) + after;
            centre += bend < 0 ? Math.Clamp((before - after) / (2 * bend), -2, 2) * h : 0;
            double there = At(measured, reference, start, step, centre);
            best = there > best.Correlation + Rounding ? new Alignment(centre, there) : best;
        }

        return best;
    }

    private static double At(
        ReadOnlySpan<double> measured, ReadOnlySpan<double> reference, double start, double step, double shift)
    {
        double[] moved = new double[measured.Length];
        (int first, int end) = Resample(reference, start - (shift * step), step, moved);
        return Correlate(measured, moved, first, end, 0, Fewest(measured, reference, step));
    }

    private static int Fewest(ReadOnlySpan<double> measured, ReadOnlySpan<double> reference, double step) =>
        (int)Math.Max(FewestSamples, FewestPart * Math.Min(measured.Length, reference.Length / step));

    /// <summary>Correlation of the measured samples with moved[i + lag], over what lies in [first, end).</summary>
    private static double Correlate(
        ReadOnlySpan<double> measured, ReadOnlySpan<double> moved, int first, int end, int lag, int fewest)
    {
        int from = Math.Max(0, first - lag);
        int count = Math.Min(measured.Length, end - lag) - from;
        return count >= fewest
            ? Correlate(measured.Slice(from, count), moved.Slice(from + lag, count))
            : double.NegativeInfinity;
    }

    private static double Correlate(ReadOnlySpan<double> a, ReadOnlySpan<double> b)
    {
        double meanA = Mean(a), meanB = Mean(b);
        double ab = 0, aa = 0, bb = 0;
        for (int i = 0; i < a.Length; i++)
        {
            double x = a[i] - meanA, y = b[i] - meanB;
            ab += x * y;
            aa += x * x;
            bb += y * y;
        }

        double size = Math.Sqrt(aa) * Math.Sqrt(bb);
        return size > 0 ? ab / size : double.NegativeInfinity;
    }

    private static double Mean(ReadOnlySpan<double> x)
    {
        double sum = 0;
        foreach (double value in x)
        {
            sum += value;
        }

        return sum / x.Length;
    }
}
