using System.Buffers;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Levels;

/// <summary>State levels by a two-state histogram: <c>vgs_on</c>, <c>vgs_off</c>, definition
/// <c>levels/histogram</c>.</summary>
public static class HistogramLevels
{
    /// <summary>Bins of the histogram unless told otherwise (common choice of IEEE 181 users; a parameter).</summary>
    public const int Bins = 256;

    // More are finer than any ADC of 16 bits, and the histogram lies on the stack.
    private const int MostBins = 65_536;

    /// <summary>Finds the two levels of a signal.</summary>
    /// <param name="samples">The signal from the middle of one state to the middle of the next; finite.</param>
    /// <param name="sigma">Noise of the signal (σ), in its unit.</param>
    /// <param name="step">Smallest step of the record (LSB), in its unit; 0: not known.</param>
    /// <param name="bins">Most bins between the extremes.</param>
    /// <returns>The levels, or null where the signal does not leave its noise.</returns>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    /// <exception cref="ArgumentOutOfRangeException">Fewer than 2 bins, or more than 65,536.</exception>
    /// <remarks>
    /// Bins between the extremes, at least one LSB wide (narrower ones would leave gaps and split a mode); the
    /// histogram is split at its middle, the fullest bin of each half is its mode, refined to the mean of the samples
    /// within ±max(3 σ, one bin) of it. Source: IEEE 181-2011 clause 5, levels by histogram mode. Overshoot moves the
    /// split, not the modes; a signal without two states has two modes all the same, so a swing below 6 σ is refused.
    /// Not for currents.
    /// </remarks>
    public static TwoLevels? Find(ReadOnlySpan<double> samples, double sigma, double step, int bins = Bins) =>
        Find(new Samples(samples), sigma, step, bins);

    /// <inheritdoc cref="Find(ReadOnlySpan{double}, double, double, int)"/>
    public static TwoLevels? Find(Samples samples, double sigma, double step, int bins = Bins)
    {
        if (!samples.HasCodes)
        {
            return Find(samples.Values, [], sigma, step, bins);
        }

        using CodeCounts counts = new(samples.Codes);
        double[] rented = ArrayPool<double>.Shared.Rent(counts.Table.Length);
        Span<double> values = rented.AsSpan(0, counts.Table.Length);
        for (int i = 0; i < values.Length; i++)
        {
            values[i] = samples.Value(counts.Lowest + i);
        }

        TwoLevels? levels = Find(values, counts.Table, sigma, step, bins);
        ArrayPool<double>.Shared.Return(rented);
        return levels;
    }

    /// <summary>Finds the levels of values that occur each as often as its count says; once, without counts.</summary>
    private static TwoLevels? Find(
        ReadOnlySpan<double> samples, ReadOnlySpan<int> counts, double sigma, double step, int bins)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(bins, 2);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(bins, MostBins);
        Finite.Require(samples, nameof(samples));
        double low = double.PositiveInfinity;
        double high = double.NegativeInfinity;
        foreach (double x in samples)
        {
            low = x < low ? x : low;
            high = x > high ? x : high;
        }

        double range = high - low;
        if (!(range > 0) || !double.IsFinite(range))
        {
            return null;
        }

        double width = Math.Max(range / bins, step);
        int count = Math.Clamp((int)Math.Ceiling(range / width), 2, bins);
        Span<int> histogram = stackalloc int[count];
        histogram.Clear();
        double scale = 1 / width;
        for (int i = 0; i < samples.Length; i++)
        {
            histogram[Math.Min(count - 1, (int)((samples[i] - low) * scale))] += counts.IsEmpty ? 1 : counts[i];
        }

        int half = count / 2;
        double reach = Math.Max(3 * sigma, width);
        double first = MeanNear(samples, counts, low + ((Fullest(histogram[..half]) + 0.5) * width), reach);
        double second = MeanNear(samples, counts, low + ((half + Fullest(histogram[half..]) + 0.5) * width), reach);
        return second - first > 6 * sigma ? new TwoLevels(first, second) : null;
    }

    private static int Fullest(ReadOnlySpan<int> bins)
    {
        int best = 0;
        for (int i = 1; i < bins.Length; i++)
        {
            best = bins[i] > bins[best] ? i : best;
        }

        return best;
    }

    private static double MeanNear(
        ReadOnlySpan<double> samples, ReadOnlySpan<int> counts, double centre, double reach)
    {
        double sum = 0;
        int count = 0;
        for (int i = 0; i < samples.Length; i++)
        {
            double away = samples[i] - centre;
            if (away <= reach && away >= -reach)
            {
                int times = counts.IsEmpty ? 1 : counts[i];
                sum += away * times;
                count += times;
            }
        }

        return count == 0 ? centre : centre + (sum / count);
    }
}
