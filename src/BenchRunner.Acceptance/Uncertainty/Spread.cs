namespace BenchRunner.Acceptance.Uncertainty;

/// <summary>Mean and spread of repeated captures (type A).</summary>
/// <param name="Mean">Mean.</param>
/// <param name="StandardDeviation">Experimental standard deviation s, with n − 1; NaN for one value.</param>
/// <param name="Count">Values, n; at least 1.</param>
public readonly record struct Spread(double Mean, double StandardDeviation, int Count)
{
    /// <summary>Standard uncertainty of the mean, s/√n; NaN for one value.</summary>
    public double OfMean => StandardDeviation / Math.Sqrt(Count);

    /// <summary>Mean and spread of values; two passes, summed in order.</summary>
    /// <param name="values">The values, finite; at least one.</param>
    /// <exception cref="ArgumentException">No value.</exception>
    public static Spread Of(IReadOnlyList<double> values)
    {
        ArgumentNullException.ThrowIfNull(values);
        if (values.Count == 0)
        {
            throw new ArgumentException("at least one value is needed", nameof(values));
        }

        double sum = 0;
        foreach (double value in values)
        {
            sum += value;
        }

        double mean = sum / values.Count;
        double squares = 0;
        foreach (double value in values)
        {
            squares += (value - mean) * (value - mean);
        }

        return new Spread(mean, values.Count > 1 ? Math.Sqrt(squares / (values.Count - 1)) : double.NaN, values.Count);
    }
}
