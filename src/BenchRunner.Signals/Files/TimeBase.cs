using System.Globalization;

namespace BenchRunner.Signals.Files;

/// <summary>Start and interval of a column of times, and whether they are uniform.</summary>
/// <param name="Origin">The first time, s.</param>
/// <param name="Interval">The interval, s.</param>
internal readonly record struct TimeBase(double Origin, double Interval)
{
    /// <summary>
    /// How far a time may lie from the uniform grid, in intervals. Times are often printed with few digits (six digits
    /// at 10 µs are steps of 0.1 ns), while a lost sample shifts the rest by a whole one.
    /// </summary>
    private const double MostDeviation = 0.3;

    /// <summary>Finds the time base of a column.</summary>
    /// <param name="times">Times, s, finite; at least two.</param>
    /// <param name="row">Receives the row that breaks it; meaningless where the result is not null.</param>
    /// <param name="found">Receives what is wrong there.</param>
    /// <returns>The time base; null where the times do not rise uniformly.</returns>
    public static TimeBase? Of(ReadOnlySpan<double> times, out int row, out string found)
    {
        (row, found) = (1, "");
        double first = times[0], mean = (times[^1] - first) / (times.Length - 1);
        for (int i = 1; i < times.Length; i++)
        {
            if (!(times[i] > times[i - 1]))
            {
                row = i;
                found = $"time goes from {Show(times[i - 1])} s to {Show(times[i])} s";
                return null;
            }
        }

        for (int i = 1; i < times.Length; i++)
        {
            bool odd = Math.Abs(times[i] - times[i - 1] - mean) > MostDeviation * mean
                || Math.Abs(times[i] - first - (i * mean)) > MostDeviation * mean;
            if (odd)
            {
                row = FirstOdd(times);
                found = $"an interval of {Show(times[row] - times[row - 1])} s where the first is "
                    + $"{Show(times[1] - first)} s";
                return null;
            }
        }

        return new TimeBase(first, Rounded(mean, times));
    }

    /// <summary>The interval in twelve digits where the times cannot tell it from that: 4e-10 in place of
    /// 4.0000000000000007e-10, which the subtraction of two rounded times made.</summary>
    private static double Rounded(double interval, ReadOnlySpan<double> times)
    {
        string digits = interval.ToString("E11", CultureInfo.InvariantCulture);
        double rounded = double.Parse(digits, CultureInfo.InvariantCulture);
        double largest = Math.Max(Math.Abs(times[0]), Math.Abs(times[^1]));
        return Math.Abs(rounded - interval) * (times.Length - 1) <= 4 * Ulp(largest)
            ? rounded
            : interval;
    }

    private static double Ulp(double value) => Math.BitIncrement(value) - value;

    private static int FirstOdd(ReadOnlySpan<double> times)
    {
        double first = times[1] - times[0];
        for (int i = 2; i < times.Length; i++)
        {
            if (Math.Abs(times[i] - times[i - 1] - first) > MostDeviation * first)
            {
                return i;
            }
        }

        return times.Length - 1;
    }

    private static string Show(double time) => time.ToString("G6", CultureInfo.InvariantCulture);
}
