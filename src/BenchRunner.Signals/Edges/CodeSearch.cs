using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Edges;

/// <summary>Where ADC codes first reach a level: what <see cref="LevelSearch"/> finds among their values.</summary>
internal static class CodeSearch
{
    /// <summary>The first sample at or beyond a level.</summary>
    /// <param name="samples">The signal, with codes.</param>
    /// <param name="level">The level, V or A.</param>
    /// <param name="upwards">Whether beyond is above.</param>
    /// <param name="from">First sample looked at.</param>
    /// <param name="last">Last sample looked at.</param>
    /// <returns>Its index; <paramref name="last"/> + 1 where there is none.</returns>
    public static int First(Samples samples, double level, bool upwards, int from, int last)
    {
        if (from > last)
        {
            return last + 1;
        }

        ReadOnlySpan<short> codes = samples.Codes[from..(last + 1)];
        // A negative gain turns the channel over: a high value is a low code.
        bool highCodes = upwards == samples.Gain > 0;
        int wall = Wall(samples.Gain, samples.Offset, level, upwards, highCodes);
        int found = wall is < short.MinValue or > short.MaxValue
            ? (highCodes == wall < short.MinValue ? 0 : -1)
            : First(codes, (short)wall, turned: !highCodes);
        return found < 0 ? last + 1 : from + found;
    }

    /// <summary>The first code, outwards, whose value is at or beyond a level, judged by the values themselves.</summary>
    /// <returns>The code; beyond the codes' range where none or all of them are.</returns>
    private static int Wall(double gain, double offset, double level, bool upwards, bool highCodes)
    {
        const int Most = short.MaxValue + 2;
        int outwards = highCodes ? 1 : -1;
        int distance = (int)Math.Clamp(Math.Round(outwards * (level - offset) / gain), -Most, Most);
        while (distance > -Most && IsBeyond(outwards * (distance - 1)))
        {
            distance--;
        }

        while (distance < Most && !IsBeyond(outwards * distance))
        {
            distance++;
        }

        return outwards * distance;

        bool IsBeyond(int code) => upwards ? (code * gain) + offset >= level : (code * gain) + offset <= level;
    }

    /// <summary>The first code at or above a wall; at or below it, where every bit is turned (~c falls as c rises).
    /// </summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private static int First(ReadOnlySpan<short> codes, short wall, bool turned)
    {
        short turn = (short)(turned ? -1 : 0);
        wall ^= turn;
        Vector256<short> walls = Vector256.Create(wall);
        Vector256<short> turns = Vector256.Create(turn);
        ref short source = ref MemoryMarshal.GetReference(codes);
        int width = Vector256<short>.Count, i = 0;
        for (; i <= codes.Length - (2 * width); i += 2 * width)
        {
            Vector256<short> first = Vector256.LoadUnsafe(ref source, (nuint)i) ^ turns;
            Vector256<short> second = Vector256.LoadUnsafe(ref source, (nuint)(i + width)) ^ turns;
            if (Vector256.GreaterThanOrEqualAny(Vector256.Max(first, second), walls))
            {
                break;
            }
        }

        for (; i < codes.Length; i++)
        {
            if ((codes[i] ^ turn) >= wall)
            {
                return i;
            }
        }

        return -1;
    }
}
