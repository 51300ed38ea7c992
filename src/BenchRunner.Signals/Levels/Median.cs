namespace BenchRunner.Signals.Levels;

/// <summary>The median of numbers.</summary>
public static class Median
{
    /// <summary>The middle value; of an even count the mean of the two middle ones.</summary>
    /// <param name="values">The numbers, finite, at least one; reordered.</param>
    /// <exception cref="ArgumentException">No numbers.</exception>
    /// <remarks>Selection by partition around the middle of three: linear on average, the same on every
    /// platform.</remarks>
    public static double Of(Span<double> values)
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

    private static double Select(Span<double> values, int rank)
    {
        int low = 0;
        int high = values.Length - 1;
        while (low < high)
        {
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
