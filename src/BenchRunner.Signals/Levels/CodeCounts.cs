using System.Buffers;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace BenchRunner.Signals.Levels;

/// <summary>How often each ADC code occurs in a stretch: what medians, levels and noise of codes are read from.</summary>
/// <remarks>An ADC has few codes and a record many samples: counting takes the place of sorting.</remarks>
internal ref struct CodeCounts
{
    private readonly int[] _rented;

    /// <summary>Counts a stretch.</summary>
    /// <param name="codes">The codes, at least one.</param>
    public CodeCounts(ReadOnlySpan<short> codes)
    {
        (Lowest, short highest) = Range(codes);
        int length = highest - Lowest + 1;
        // Equal codes follow each other, and a count must be written before it can be read again: two tables in turn.
        _rented = ArrayPool<int>.Shared.Rent(2 * length);
        Span<int> even = _rented.AsSpan(0, length);
        Span<int> odd = _rented.AsSpan(length, length);
        even.Clear();
        odd.Clear();
        Count(codes, Lowest, even, odd);
        for (int i = 0; i < even.Length; i++)
        {
            even[i] += odd[i];
        }

        Table = even;
    }

    /// <summary>The lowest code that occurs.</summary>
    public short Lowest { get; }

    /// <summary>How often each code occurs, from the lowest to the highest that does.</summary>
    public ReadOnlySpan<int> Table { get; }

    /// <summary>The lowest and the highest code of a stretch.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static (short Lowest, short Highest) Range(ReadOnlySpan<short> codes)
    {
        short low = codes[0];
        short high = codes[0];
        int width = Vector256<short>.Count, i = 0;
        if (codes.Length >= width)
        {
            ref short source = ref MemoryMarshal.GetReference(codes);
            Vector256<short> lows = Vector256.Create(low);
            Vector256<short> highs = lows;
            for (; i <= codes.Length - width; i += width)
            {
                Vector256<short> some = Vector256.LoadUnsafe(ref source, (nuint)i);
                lows = Vector256.Min(lows, some);
                highs = Vector256.Max(highs, some);
            }

            for (int lane = 0; lane < width; lane++)
            {
                low = Math.Min(low, lows[lane]);
                high = Math.Max(high, highs[lane]);
            }
        }

        for (; i < codes.Length; i++)
        {
            low = Math.Min(low, codes[i]);
            high = Math.Max(high, codes[i]);
        }

        return (low, high);
    }

    /// <summary>The code at a rank, from the lowest, rank 0.</summary>
    public readonly int At(int rank)
    {
        int index = 0;
        while (rank >= Table[index])
        {
            rank -= Table[index++];
        }

        return Lowest + index;
    }

    /// <summary>Gives the table back.</summary>
    public readonly void Dispose() => ArrayPool<int>.Shared.Return(_rented);

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static void Count(ReadOnlySpan<short> codes, int lowest, Span<int> even, Span<int> odd)
    {
        int i = 0;
        for (; i < codes.Length - 1; i += 2)
        {
            even[codes[i] - lowest]++;
            odd[codes[i + 1] - lowest]++;
        }

        if (i < codes.Length)
        {
            even[codes[i] - lowest]++;
        }
    }
}
