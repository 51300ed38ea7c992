using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.LoadCurrent;

/// <summary>A straight line over positions in samples: value = centre value + slope · (position − centre).</summary>
/// <param name="Centre">Position of the middle of the fit, in samples: there value and slope do not depend on each
/// other.</param>
/// <param name="Value">Value at <paramref name="Centre"/>.</param>
/// <param name="Slope">Slope, a sample.</param>
public readonly record struct Line(double Centre, double Value, double Slope)
{
    /// <summary>The value at a position.</summary>
    /// <param name="position">Position, in samples.</param>
    public double At(double position) => Value + (Slope * (position - Centre));

    /// <summary>Least-squares line through the samples of an interval.</summary>
    /// <param name="samples">The signal, uniform, finite.</param>
    /// <param name="from">Start of the interval, in samples.</param>
    /// <param name="to">End of the interval, in samples.</param>
    /// <param name="slope">The slope a sample where it is held; null: it is fitted too.</param>
    /// <returns>The line; null where the interval holds fewer than three samples (one where the slope is
    /// held).</returns>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    /// <remarks>Ordinary least squares on a uniform grid: the sum of squared positions is closed, n(n² −
    /// 1)/12.</remarks>
    public static Line? Fit(ReadOnlySpan<double> samples, double from, double to, double? slope = null) =>
        Fit(new Samples(samples), from, to, slope);

    /// <inheritdoc cref="Fit(ReadOnlySpan{double}, double, double, double?)"/>
    public static Line? Fit(Samples samples, double from, double to, double? slope = null)
    {
        int first = Math.Max(0, (int)Math.Ceiling(Math.Min(from, samples.Length)));
        int last = (int)Math.Min(samples.Length - 1, Math.Floor(to));
        int count = last - first + 1;
        if (count < (slope is null ? 3 : 1))
        {
            return null;
        }

        double half = (count - 1) / 2.0;
        (double mean, double moment) = samples.HasCodes
            ? Moments(samples.Slice(first, count))
            : Moments(samples.Values.Slice(first, count));
        double squares = (double)count * (((double)count * count) - 1) / 12;
        return new Line(first + half, mean, slope ?? (moment / squares));
    }

    /// <summary>Mean, and sum of the samples times their distance from the middle.</summary>
    private static (double Mean, double Moment) Moments(ReadOnlySpan<double> samples)
    {
        double half = (samples.Length - 1) / 2.0;
        double reference = samples[0];
        double sum = 0;
        double moment = 0;
        for (int i = 0; i < samples.Length; i++)
        {
            double y = samples[i] - reference;
            sum += y;
            moment += y * (i - half);
        }

        Finite.Require(moment, samples, 0, samples.Length - 1, nameof(samples));
        return (reference + (sum / samples.Length), moment);
    }

    private static (double Mean, double Moment) Moments(Samples samples)
    {
        long sum = CodeSums.Sum(samples.Codes);
        Int128 twice = (2 * CodeSums.Moment(samples.Codes)) - ((Int128)(samples.Length - 1) * sum);
        return ((samples.Gain * ((double)sum / samples.Length)) + samples.Offset, samples.Gain * (double)twice / 2);
    }
}
