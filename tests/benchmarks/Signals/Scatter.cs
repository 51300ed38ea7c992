namespace BenchRunner.Benchmarks;

/// <summary>Errors of many draws.</summary>
/// <param name="Spread">Their standard deviation, in the errors' unit.</param>
/// <param name="Bias">Their mean over their standard deviation, as a magnitude.</param>
internal readonly record struct Scatter(double Spread, double Bias)
{
    /// <summary>Of errors.</summary>
    public static Scatter Of(List<double> errors)
    {
        double mean = errors.Average();
        double spread = Math.Sqrt(errors.Sum(error => (error - mean) * (error - mean)) / (errors.Count - 1));
        return new Scatter(spread, Math.Abs(mean) / spread);
    }
}
