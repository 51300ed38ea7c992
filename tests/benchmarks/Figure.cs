namespace BenchRunner.Benchmarks;

/// <summary>One measured figure: the median of its rounds, and how far they lie apart.</summary>
/// <param name="Median">Median of the rounds; of a time: processor seconds.</param>
/// <param name="Spread">Half the distance of the rounds' quartiles over the median, 1.</param>
/// <param name="LeastWall">Of a time: the least by the wall clock, s; null: no time.</param>
internal readonly record struct Figure(double Median, double Spread, double? LeastWall = null)
{
    /// <summary>The figure of some rounds.</summary>
    /// <param name="rounds">At least one.</param>
    public static Figure Of(IReadOnlyList<Spent> rounds)
    {
        double[] seconds = [.. rounds.Select(round => round.Processor).Order()];
        double median = seconds[seconds.Length / 2];
        return new Figure(
            median,
            (seconds[seconds.Length * 3 / 4] - seconds[seconds.Length / 4]) / (2 * median),
            rounds.Min(round => round.LeastWall));
    }
}
