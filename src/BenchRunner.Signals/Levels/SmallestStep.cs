using System.Buffers;

namespace BenchRunner.Signals.Levels;

/// <summary>The smallest step of a record (LSB): the smallest distance of two distinct values in it.</summary>
public static class SmallestStep
{
    /// <summary>The smallest distance of distinct codes.</summary>
    /// <param name="codes">ADC codes.</param>
    /// <returns>Codes; 1 where fewer than two distinct codes occur.</returns>
    /// <remarks>An ADC of 8 bits whose codes are sent in the upper half of 16 has a step of 256.</remarks>
    public static int OfCodes(ReadOnlySpan<short> codes)
    {
        byte[] rented = ArrayPool<byte>.Shared.Rent(ushort.MaxValue + 1);
        Span<byte> seen = rented.AsSpan(0, ushort.MaxValue + 1);
        seen.Clear();
        int low = ushort.MaxValue;
        int high = 0;
        foreach (short code in codes)
        {
            int index = code - short.MinValue;
            seen[index] = 1;
            low = Math.Min(low, index);
            high = Math.Max(high, index);
        }

        int smallest = int.MaxValue;
        int before = low;
        for (int index = low + 1; index <= high; index++)
        {
            if (seen[index] != 0)
            {
                smallest = Math.Min(smallest, index - before);
                before = index;
            }
        }

        ArrayPool<byte>.Shared.Return(rented);
        return smallest > ushort.MaxValue ? 1 : smallest;
    }

    /// <summary>The smallest distance of distinct values.</summary>
    /// <param name="samples">Values; those that are not finite are passed over.</param>
    /// <returns>In the unit of the values; 0 where fewer than two distinct ones occur.</returns>
    /// <remarks>Sorts a copy: for records whose step nobody stated (a text file). Values rounded to decimals give steps
    /// slightly off the ADC's.</remarks>
    public static double OfValues(ReadOnlySpan<double> samples)
    {
        double[] sorted = samples.ToArray();
        Array.Sort(sorted);
        double smallest = double.PositiveInfinity;
        double before = double.NaN;
        foreach (double x in sorted)
        {
            if (double.IsFinite(x))
            {
                double gap = x - before;
                smallest = gap > 0 && gap < smallest ? gap : smallest;
                before = x;
            }
        }

        return double.IsFinite(smallest) ? smallest : 0;
    }
}
