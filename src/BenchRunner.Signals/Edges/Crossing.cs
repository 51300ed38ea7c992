using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Edges;

/// <summary>Where a signal crosses a level.</summary>
public static class Crossing
{
    /// <summary>The first crossing of a level that counts: the signal goes on beyond the level by the
    /// hysteresis.</summary>
    /// <param name="samples">The signal, uniform; not modified.</param>
    /// <param name="level">The level, in the signal's unit.</param>
    /// <param name="hysteresis">How far beyond the level the signal must go, 0 or more.</param>
    /// <param name="direction">Which way the level is crossed.</param>
    /// <param name="from">Earliest position, in samples.</param>
    /// <param name="to">Latest position, in samples.</param>
    /// <returns>Position in samples, interpolated on the straight line between the two samples that straddle the level;
    /// null where no crossing counts.</returns>
    /// <exception cref="ArgumentException">A sample up to where the search ends is NaN or infinite.</exception>
    /// <remarks>
    /// Where noise crosses several times, it is the last crossing before the hysteresis is reached. A straddle is
    /// "at or before" then "beyond", so a signal that rests on the level crosses where it leaves it. Source: IEEE
    /// 181-2011, interpolation between the samples that straddle a reference level; the hysteresis is our own.
    /// </remarks>
    /// <example>Samples 0, 1, 3 cross 2 upwards at 1.5.</example>
    public static double? First(
        ReadOnlySpan<double> samples,
        double level,
        double hysteresis,
        CrossingDirection direction,
        double from,
        double to) =>
        First(new Samples(samples), level, hysteresis, direction, from, to);

    /// <inheritdoc cref="First(ReadOnlySpan{double}, double, double, CrossingDirection, double, double)"/>
    public static double? First(
        Samples samples,
        double level,
        double hysteresis,
        CrossingDirection direction,
        double from,
        double to)
    {
        int start = Math.Max(0, (int)Math.Floor(Math.Min(from, samples.Length)));
        int last = (int)Math.Min(samples.Length - 1, Math.Ceiling(to));
        if (start >= last)
        {
            return null;
        }

        bool rises = direction == CrossingDirection.Rising;
        double counts = LevelSearch.Counts(level, hysteresis, rises);
        while (start < last)
        {
            int beyond = LevelSearch.First(samples, counts, rises, start + 1, last);
            Finite.Require(samples, start, Math.Min(beyond, last), nameof(samples));
            if (beyond > last)
            {
                return null;
            }

            double found = Last(samples.Values, level, rises, start, beyond);
            if (found >= from)
            {
                return found <= to ? found : null;
            }

            // Beyond already, or crossed too early: only after coming back can it cross again.
            start = LevelSearch.First(samples, level, !rises, beyond + 1, last);
            Finite.Require(samples, beyond, Math.Min(start, last), nameof(samples));
        }

        return null;
    }

    /// <summary>The last crossing between two samples, NaN where there is none.</summary>
    internal static double Last(ReadOnlySpan<double> samples, double level, bool rises, int start, int beyond)
    {
        for (int i = beyond; i > start; i--)
        {
            double before = samples[i - 1];
            double now = samples[i];
            if (rises ? before <= level && now > level : before >= level && now < level)
            {
                return i - 1 + ((level - before) / (now - before));
            }
        }

        return double.NaN;
    }

    /// <summary>The first position at which a signal is at or below a level, without hysteresis.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="level">The level, in the signal's unit.</param>
    /// <param name="from">Earliest position, in samples.</param>
    /// <param name="to">Latest position, in samples.</param>
    /// <returns>Position in samples, interpolated; null where the signal stays above.</returns>
    /// <exception cref="ArgumentException">A sample up to where the search ends is NaN or infinite.</exception>
    public static double? FirstAtOrBelow(ReadOnlySpan<double> samples, double level, double from, double to)
    {
        int start = Math.Max(0, (int)Math.Ceiling(from));
        int last = (int)Math.Min(samples.Length - 1, Math.Floor(to));
        for (int i = start; i <= last; i++)
        {
            Finite.Require(samples[i], nameof(samples));
            if (samples[i] <= level)
            {
                return i == start || samples[i - 1] <= level
                    ? i
                    : i - 1 + ((samples[i - 1] - level) / (samples[i - 1] - samples[i]));
            }
        }

        return null;
    }
}
