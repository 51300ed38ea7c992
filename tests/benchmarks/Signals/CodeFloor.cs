using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;
using System.Runtime.Intrinsics.X86;

namespace BenchRunner.Benchmarks;

/// <summary>The least that any work on codes costs: reading each of them once.</summary>
internal static class CodeFloor
{
    private const int Unrolled = 4;

    /// <summary>The sum of codes, many at a time.</summary>
    /// <param name="codes">The codes; few enough that a lane's sum stays within 32 bits: 10 million of 12 bits.</param>
    public static long Sum(ReadOnlySpan<short> codes)
    {
        long sum = 0;
        int i = 0;
        if (Avx2.IsSupported)
        {
            ref short source = ref MemoryMarshal.GetReference(codes);
            Vector256<short> ones = Vector256.Create((short)1);
            Vector256<int> a = default;
            Vector256<int> b = default;
            Vector256<int> c = default;
            Vector256<int> d = default;
            int width = Vector256<short>.Count;
            for (; i <= codes.Length - (Unrolled * width); i += Unrolled * width)
            {
                nuint at = (nuint)i;
                a += Avx2.MultiplyAddAdjacent(Vector256.LoadUnsafe(ref source, at), ones);
                b += Avx2.MultiplyAddAdjacent(Vector256.LoadUnsafe(ref source, at + (nuint)width), ones);
                c += Avx2.MultiplyAddAdjacent(Vector256.LoadUnsafe(ref source, at + (nuint)(2 * width)), ones);
                d += Avx2.MultiplyAddAdjacent(Vector256.LoadUnsafe(ref source, at + (nuint)(3 * width)), ones);
            }

            sum = (long)Vector256.Sum(a) + Vector256.Sum(b) + Vector256.Sum(c) + Vector256.Sum(d);
        }

        for (; i < codes.Length; i++)
        {
            sum += codes[i];
        }

        return sum;
    }
}
