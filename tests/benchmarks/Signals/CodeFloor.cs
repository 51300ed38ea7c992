using System.Numerics;
using System.Runtime.InteropServices;

namespace BenchRunner.Benchmarks;

/// <summary>The least that any work on codes costs: reading each of them once.</summary>
internal static class CodeFloor
{
    /// <summary>The sum of codes, many at a time.</summary>
    /// <param name="codes">The codes; few enough that a lane's sum stays within 32 bits: 2 million of 12 bits.</param>
    public static long Sum(ReadOnlySpan<short> codes)
    {
        ReadOnlySpan<Vector<short>> wide = MemoryMarshal.Cast<short, Vector<short>>(codes);
        Vector<int> first = Vector<int>.Zero;
        Vector<int> second = Vector<int>.Zero;
        Vector<int> third = Vector<int>.Zero;
        Vector<int> fourth = Vector<int>.Zero;
        int i = 0;
        for (; i + 1 < wide.Length; i += 2)
        {
            first += Vector.WidenLower(wide[i]);
            second += Vector.WidenUpper(wide[i]);
            third += Vector.WidenLower(wide[i + 1]);
            fourth += Vector.WidenUpper(wide[i + 1]);
        }

        long sum = (long)Vector.Sum(first) + Vector.Sum(second) + Vector.Sum(third) + Vector.Sum(fourth);
        foreach (short code in codes[(i * Vector<short>.Count)..])
        {
            sum += code;
        }

        return sum;
    }
}
