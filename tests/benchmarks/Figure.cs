namespace BenchRunner.Benchmarks;

/// <summary>One measured figure: the median of its rounds, and how far they lie apart.</summary>
/// <param name="Median">Median of the rounds.</param>
/// <param name="Spread">Half the distance of the rounds' quartiles over the median, 1.</param>
internal readonly record struct Figure(double Median, double Spread)
{
    /// <summary>The figure of some rounds.</summary>
    /// <param name="rounds">One number a round; reordered.</param>
    public static Figure Of(double[] rounds)
    {
        Array.Sort(rounds);
        double median = rounds[rounds.Length / 2];
        return new Figure(median, (rounds[rounds.Length * 3 / 4] - rounds[rounds.Length / 4]) / (2 * median));
    }
}
