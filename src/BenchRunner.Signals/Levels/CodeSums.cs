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
        long sum = 0;
        int i = 0;
        if (Avx2.IsSupported)
        {
            ref short source = ref MemoryMarshal.GetReference(codes);
            Vector256<short> ones = Vector256.Create((short)1);
            while (codes.Length - i >= Vector256<short>.Count)
            {
                // 2^15 steps of two codes each stay inside 32 bits a lane.
                int end = i + (Math.Min((codes.Length - i) / Vector256<short>.Count, Block) * Vector256<short>.Count);
                Vector256<int> part = Vector256<int>.Zero;
                for (; i < end; i += Vector256<short>.Count)
                {
                    part += Avx2.MultiplyAddAdjacent(Vector256.LoadUnsafe(ref source, (nuint)i), ones);
                }

                sum += WideSum(part);
            }
        }

        for (; i < codes.Length; i++)
        {
            sum += codes[i];
        }

        return sum;
    }

    /// <summary>Σ a·b of two channels of one length.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static long Products(ReadOnlySpan<short> a, ReadOnlySpan<short> b)
    {
        b = b[..a.Length];
        long sum = 0;
        int i = 0;
        if (Avx2.IsSupported)
        {
            ref short first = ref MemoryMarshal.GetReference(a);
            ref short second = ref MemoryMarshal.GetReference(b);
            // Two products a lane reach 2^31, one too many, only where all four codes are −32768; lanes are taken as
            // their distance below 2^31, which always fits 32 bits without a sign.
            Vector256<long> below = Vector256<long>.Zero;
            Vector256<int> top = Vector256.Create(int.MinValue);
            for (; i <= a.Length - Vector256<short>.Count; i += Vector256<short>.Count)
            {
                Vector256<int> pairs = Avx2.MultiplyAddAdjacent(
                    Vector256.LoadUnsafe(ref first, (nuint)i), Vector256.LoadUnsafe(ref second, (nuint)i));
                (Vector256<ulong> low, Vector256<ulong> high) = Vector256.Widen((top - pairs).AsUInt32());
                below += (low + high).AsInt64();
            }

            sum = ((long)i / 2 << 31) - Vector256.Sum(below);
        }

        for (; i < a.Length; i++)
        {
            sum += a[i] * b[i];
        }

        return sum;
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

    private static long WideSum(Vector256<int> lanes)
    {
        (Vector256<long> low, Vector256<long> high) = Vector256.Widen(lanes);
        return Vector256.Sum(low + high);
    }
}
