using System.Numerics;
using System.Runtime.InteropServices;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Edges;

/// <summary>Where a signal first reaches a level: many samples a step, the same answer as one by one.</summary>
internal static class LevelSearch
{
    /// <summary>Where a signal has gone on beyond a level by the hysteresis, and beyond it at all.</summary>
    public static double Counts(double level, double hysteresis, bool upwards) => upwards
        ? Math.Max(level + hysteresis, Math.BitIncrement(level))
        : Math.Min(level - hysteresis, Math.BitDecrement(level));

    /// <summary>The first sample at or beyond a level.</summary>
    /// <param name="samples">The signal.</param>
    /// <param name="level">The level.</param>
    /// <param name="upwards">Whether beyond is above.</param>
    /// <param name="from">First sample looked at.</param>
    /// <param name="last">Last sample looked at.</param>
    /// <returns>Its index; <paramref name="last"/> + 1 where there is none.</returns>
    public static int First(Samples samples, double level, bool upwards, int from, int last) => samples.HasCodes
        ? CodeSearch.First(samples, level, upwards, from, last)
        : First(samples.Values, level, upwards, from, last);

    private static int First(ReadOnlySpan<double> samples, double level, bool upwards, int from, int last)
    {
        int i = from;
        Vector<double> wall = new(level);
        int width = Vector<double>.Count;
        ref double start = ref MemoryMarshal.GetReference(samples);
        for (; i + width - 1 <= last; i += width)
        {
            Vector<double> x = Vector.LoadUnsafe(ref start, (nuint)i);
            if (upwards ? Vector.GreaterThanOrEqualAny(x, wall) : Vector.LessThanOrEqualAny(x, wall))
            {
                break;
            }
        }

        for (; i <= last; i++)
        {
            if (upwards ? samples[i] >= level : samples[i] <= level)
            {
                return i;
            }
        }

        return last + 1;
    }
}
