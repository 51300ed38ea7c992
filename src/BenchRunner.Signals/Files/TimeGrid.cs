using System.Globalization;

namespace BenchRunner.Signals.Files;

/// <summary>Whether times that come one by one rise by equal intervals, without keeping them.</summary>
/// <remarks>
/// The mean interval m is known only at the end. Every time says between which bounds m must lie for it to be on the
/// grid: |t(i) − t(0) − i m| and |t(i) − t(i−1) − m| are both at most a share of m. What is kept is where all of
/// these bounds meet.
/// </remarks>
internal sealed class TimeGrid
{
    /// <summary>
    /// How far a time may lie from the uniform grid, in intervals. Times are often printed with few digits (six digits
    /// at 10 µs are steps of 0.1 ns), while a lost sample shifts the rest by a whole one.
    /// </summary>
    private const double MostDeviation = 0.3;

    private double _first;
    private double _firstInterval;
    private double _last;
    private double _lowest;
    private double _highest = double.PositiveInfinity;
    private (int Row, double Before, double At)? _backwards;
    private (int Row, double Interval)? _odd;
    private double _lastInterval;

    /// <summary>Times taken.</summary>
    public int Count { get; private set; }

    /// <summary>The first time, s.</summary>
    public double First => _first;

    /// <summary>Takes the next time, s; finite.</summary>
    public void Add(double time)
    {
        if (Count == 0)
        {
            (_first, _last, Count) = (time, time, 1);
            return;
        }

        double interval = time - _last;
        if (!(interval > 0))
        {
            _backwards ??= (Count, _last, time);
        }

        if (Count == 1)
        {
            _firstInterval = interval;
        }
        else if (Math.Abs(interval - _firstInterval) > MostDeviation * _firstInterval)
        {
            _odd ??= (Count, interval);
        }

        Bound(time - _first, Count);
        Bound(interval, 1);
        (_last, _lastInterval) = (time, interval);
        Count++;
    }

    /// <summary>The time base of all times taken; at least two.</summary>
    /// <param name="row">Receives the row, from 0, that breaks it; meaningless where the result is not null.</param>
    /// <param name="found">Receives what is wrong there.</param>
    /// <returns>The time base; null where the times do not rise uniformly.</returns>
    public TimeBase? Base(out int row, out string found)
    {
        if (_backwards is { } backwards)
        {
            row = backwards.Row;
            found = $"time goes from {Show(backwards.Before)} s to {Show(backwards.At)} s";
            return null;
        }

        double mean = (_last - _first) / (Count - 1);
        (int Row, double Interval) odd = _odd ?? (Count - 1, _lastInterval);
        row = odd.Row;
        found = $"an interval of {Show(odd.Interval)} s where the first is {Show(_firstInterval)} s";
        return mean >= _lowest && mean <= _highest && double.IsFinite(mean)
            ? new TimeBase(_first, Rounded(mean))
            : null;
    }

    /// <summary>Some intervals took so long: the mean must be one of which this is no further off than allowed.</summary>
    private void Bound(double time, int intervals)
    {
        _lowest = Math.Max(_lowest, time / (intervals + MostDeviation));
        _highest = Math.Min(_highest, time / (intervals - MostDeviation));
    }

    /// <summary>The interval in twelve digits where the times cannot tell it from that: 4e-10 in place of
    /// 4.0000000000000007e-10, which the subtraction of two rounded times made.</summary>
    private double Rounded(double interval)
    {
        string digits = interval.ToString("E11", CultureInfo.InvariantCulture);
        double rounded = double.Parse(digits, CultureInfo.InvariantCulture);
        double largest = Math.Max(Math.Abs(_first), Math.Abs(_last));
        return Math.Abs(rounded - interval) * (Count - 1) <= 4 * (Math.BitIncrement(largest) - largest)
            ? rounded
            : interval;
    }

    private static string Show(double time) => time.ToString("G6", CultureInfo.InvariantCulture);
}
