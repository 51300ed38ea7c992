using System.Buffers;
using System.Numerics;
using System.Runtime.InteropServices;

namespace BenchRunner.Signals.Levels;

/// <summary>The smallest step of a record (LSB): the smallest distance of two distinct values in it.</summary>
public static class SmallestStep
{
    private const int FirstPart = 4096;

    /// <summary>The smallest distance of distinct codes.</summary>
    /// <param name="codes">ADC codes.</param>
    /// <returns>Codes; 1 where fewer than two distinct codes occur.</returns>
    /// <remarks>An ADC of 8 bits whose codes are sent in the upper half of 16 has a step of 256.</remarks>
    public static int OfCodes(ReadOnlySpan<short> codes)
    {
        // No distance is below the lowest bit in which any two codes differ: where that is found, nothing can undercut.
        int least = LowestBit(codes);
        byte[] rented = ArrayPool<byte>.Shared.Rent(ushort.MaxValue + 1);
        Span<byte> seen = rented.AsSpan(0, ushort.MaxValue + 1);
        seen.Clear();
        int smallest = int.MaxValue;
        for (int part = FirstPart, from = 0; from < codes.Length && smallest > least; part *= 8)
        {
            int to = Math.Min(codes.Length, from + part);
            foreach (short code in codes[from..to])
            {
                seen[code - short.MinValue] = 1;
            }

            smallest = SmallestGap(seen);
            from = to;
        }

        ArrayPool<byte>.Shared.Return(rented);
        return smallest == int.MaxValue ? 1 : smallest;
    }

    private static int LowestBit(ReadOnlySpan<short> codes)
    {
        int differ = 0;
        ReadOnlySpan<Vector<short>> wide = MemoryMarshal.Cast<short, Vector<short>>(codes);
        if (!wide.IsEmpty)
        {
            Vector<short> first = new(codes[0]);
            Vector<short> any = Vector<short>.Zero;
            foreach (Vector<short> some in wide)
            {
                any |= some ^ first;
            }

            for (int lane = 0; lane < Vector<short>.Count; lane++)
            {
                differ |= (ushort)any[lane];
            }
        }

        foreach (short code in codes[(wide.Length * Vector<short>.Count)..])
        {
            differ |= (ushort)(code ^ codes[0]);
        }

        return differ & -differ;
    }

    private static int SmallestGap(ReadOnlySpan<byte> seen)
    {
        int smallest = int.MaxValue;
        int before = seen.IndexOf((byte)1);
        while (before >= 0 && seen[(before + 1)..].IndexOf((byte)1) is >= 0 and var gap)
        {
            smallest = Math.Min(smallest, gap + 1);
            before += gap + 1;
        }

        return smallest;
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
