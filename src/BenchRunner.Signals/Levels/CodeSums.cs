using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;
using System.Runtime.Intrinsics.X86;

namespace BenchRunner.Signals.Levels;

/// <summary>Exact sums over ADC codes: whole numbers, so the same on every machine and in every order.</summary>
/// <remarks>Whatever offset and gain the codes have is applied to a sum once, at its end. No record of up to 2^31
/// samples can overflow.</remarks>
internal static class CodeSums
{
    // Below this many samples Σ j·c of a block fits 64 bits with room to spare, whatever the codes.
    private const int Block = 1 << 15;

    /// <summary>Σ c.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static long Sum(ReadOnlySpan<short> codes)
    {
        const int Stride = 64;
        long sum = 0;
        int i = 0;
        if (Avx2.IsSupported)
        {
            ref short source = ref MemoryMarshal.GetReference(codes);
            while (codes.Length - i >= Stride)
            {
                // 2^15 steps of two codes each stay inside 32 bits a lane; four lanes' sums wait for nobody.
                int end = i + (Math.Min((codes.Length - i) / Stride, Block) * Stride);
                Vector256<int> first = Vector256<int>.Zero, second = first, third = first, fourth = first;
                for (; i < end; i += Stride)
                {
                    nuint at = (nuint)i;
                    first += Pairs(Vector256.LoadUnsafe(ref source, at));
                    second += Pairs(Vector256.LoadUnsafe(ref source, at + 16));
                    third += Pairs(Vector256.LoadUnsafe(ref source, at + 32));
                    fourth += Pairs(Vector256.LoadUnsafe(ref source, at + 48));
                }

                sum += WideSum(first) + WideSum(second) + WideSum(third) + WideSum(fourth);
            }
        }

        for (; i < codes.Length; i++)
        {
            sum += codes[i];
        }

        return sum;
    }

    /// <summary>Σ a, Σ b and Σ a·b of two channels of one length, in one pass.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static (long First, long Second, long Products) Products(ReadOnlySpan<short> a, ReadOnlySpan<short> b)
    {
        b = b[..a.Length];
        (long sumA, long sumB, long below) = (0, 0, 0);
        int i = 0;
        if (Avx2.IsSupported)
        {
            ref short first = ref MemoryMarshal.GetReference(a);
            ref short second = ref MemoryMarshal.GetReference(b);
            // Two products a lane reach 2^31, one too many, only where all four codes are −32768; lanes are taken as
            // their distance below 2^31, which always fits 32 bits without a sign. Its halves are summed by themselves:
            // 2^15 of them stay inside 32 bits.
            Vector256<int> top = Vector256.Create(int.MinValue);
            Vector256<uint> half = Vector256.Create(0xFFFFu);
            int width = Vector256<short>.Count;
            while (a.Length - i >= width)
            {
                int end = i + (Math.Min((a.Length - i) / width, Block) * width);
                Vector256<int> partA = Vector256<int>.Zero, partB = partA;
                Vector256<uint> low = Vector256<uint>.Zero, high = low;
                for (; i < end; i += width)
                {
                    Vector256<short> x = Vector256.LoadUnsafe(ref first, (nuint)i);
                    Vector256<short> y = Vector256.LoadUnsafe(ref second, (nuint)i);
                    partA += Pairs(x);
                    partB += Pairs(y);
                    Vector256<uint> distance = (top - Avx2.MultiplyAddAdjacent(x, y)).AsUInt32();
                    low += distance & half;
                    high += distance >>> 16;
                }

                sumA += WideSum(partA);
                sumB += WideSum(partB);
                below += WideSum(low.AsInt32()) + (WideSum(high.AsInt32()) << 16);
            }
        }

        long products = ((long)i / 2 << 31) - below;
        for (; i < a.Length; i++)
        {
            sumA += a[i];
            sumB += b[i];
            products += a[i] * b[i];
        }

        return (sumA, sumB, products);
    }

    /// <summary>Σ j·c, j from 0: the first moment of a stretch.</summary>
    public static Int128 Moment(ReadOnlySpan<short> codes)
    {
        Int128 moment = 0;
        for (int start = 0; start < codes.Length; start += Block)
        {
            ReadOnlySpan<short> block = codes.Slice(start, Math.Min(Block, codes.Length - start));
            moment += ((Int128)start * Sum(block)) + BlockMoment(block);
        }

        return moment;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static long BlockMoment(ReadOnlySpan<short> codes)
    {
        long sum = 0;
        int i = 0;
        if (Avx2.IsSupported)
        {
            ref short source = ref MemoryMarshal.GetReference(codes);
            Vector256<short> index = Vector256.Create(0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15);
            Vector256<short> step = Vector256.Create((short)Vector256<short>.Count);
            Vector256<long> sums = Vector256<long>.Zero;
            for (; i <= codes.Length - Vector256<short>.Count; i += Vector256<short>.Count)
            {
                (Vector256<long> low, Vector256<long> high) = Vector256.Widen(
                    Avx2.MultiplyAddAdjacent(Vector256.LoadUnsafe(ref source, (nuint)i), index));
                sums += low + high;
                index += step;
            }

            sum = Vector256.Sum(sums);
        }

        for (; i < codes.Length; i++)
        {
            sum += (long)i * codes[i];
        }

        return sum;
    }

    /// <summary>Sums of neighbours.</summary>
    private static Vector256<int> Pairs(Vector256<short> codes) =>
        Avx2.MultiplyAddAdjacent(codes, Vector256.Create((short)1));

    private static long WideSum(Vector256<int> lanes)
    {
        (Vector256<long> low, Vector256<long> high) = Vector256.Widen(lanes);
        return Vector256.Sum(low + high);
    }
}
