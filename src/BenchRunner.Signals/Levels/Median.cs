using System.Buffers;
using System.Numerics;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Levels;

/// <summary>The median of numbers.</summary>
public static class Median
{
    /// <summary>The middle value; of an even count the mean of the two middle ones.</summary>
    /// <param name="values">The numbers, finite, at least one; reordered.</param>
    /// <returns>The median, in their unit.</returns>
    /// <exception cref="ArgumentException">No numbers, or one that is NaN or infinite.</exception>
    /// <remarks>Selection by partition around the middle of three, linear; where partitions stay lopsided what is left
    /// is sorted, so no order of the numbers makes it quadratic. The same on every platform.</remarks>
    public static double Of(Span<double> values)
    {
        Finite.Require(values, nameof(values));
        return OfFinite(values);
    }

    /// <summary>The same of numbers that are known to be finite, or whose overflow does no harm.</summary>
    internal static double OfFinite(Span<double> values)
    {
        if (values.IsEmpty)
        {
            throw new ArgumentException("A median needs at least one number.", nameof(values));
        }

        int middle = values.Length / 2;
        double upper = Select(values, middle);
        if (values.Length % 2 == 1)
        {
            return upper;
        }

        double lower = values[0];
        for (int i = 1; i < middle; i++)
        {
            lower = values[i] > lower ? values[i] : lower;
        }

        return lower + ((upper - lower) / 2);
    }

    /// <summary>The middle value of a stretch; of an even count the mean of the two middle ones.</summary>
    /// <param name="samples">The stretch, at least one sample; not reordered.</param>
    internal static double Of(Samples samples)
    {
        int middle = samples.Length / 2;
        if (samples.HasCodes)
        {
            using CodeCounts counts = new(samples.Codes);
            double above = samples.Value(counts.At(middle));
            double below = samples.Length % 2 == 1 ? above : samples.Value(counts.At(middle - 1));
            (below, above) = (Math.Min(below, above), Math.Max(below, above));
            return below + ((above - below) / 2);
        }

        double[] rented = ArrayPool<double>.Shared.Rent(samples.Length);
        Span<double> copy = rented.AsSpan(0, samples.Length);
        samples.Values.CopyTo(copy);
        double median = Of(copy);
        ArrayPool<double>.Shared.Return(rented);
        return median;
    }

    private static double Select(Span<double> values, int rank)
    {
        int low = 0;
        int high = values.Length - 1;
        int left = 2 * BitOperations.Log2((uint)values.Length | 1);
        while (low < high)
        {
            if (left-- == 0)
            {
                values[low..(high + 1)].Sort();
                break;
            }

            double a = values[low];
            double b = values[(low + high) >>> 1];
            double c = values[high];
            double pivot = Math.Max(Math.Min(a, b), Math.Min(Math.Max(a, b), c));
            int i = low;
            int j = high;
            while (i <= j)
            {
                while (values[i] < pivot)
                {
                    i++;
                }

                while (values[j] > pivot)
                {
                    j--;
                }

                if (i <= j)
                {
                    (values[i], values[j]) = (values[j], values[i]);
                    i++;
                    j--;
                }
            }

            if (rank <= j)
            {
                high = j;
            }
            else if (rank >= i)
            {
                low = i;
            }
            else
            {
                break;
            }
        }

        return values[rank];
    }
}
