namespace BenchRunner.Benchmarks;

/// <summary>Normal numbers of mean 0 and deviation 1, by Box and Muller.</summary>
/// <param name="seed">Equal seeds, equal numbers.</param>
internal sealed class Normal(int seed)
{
    private readonly Random _random = new(seed);
    private double? _spare;

    /// <summary>The next number.</summary>
    public double Next()
    {
        if (_spare is { } spare)
        {
            _spare = null;
            return spare;
        }

        double radius = Math.Sqrt(-2 * Math.Log(1 - _random.NextDouble()));
        (double sin, double cos) = Math.SinCos(2 * Math.PI * _random.NextDouble());
        _spare = radius * sin;
        return radius * cos;
    }

    /// <summary>A phase, rad, anywhere on the circle.</summary>
    public double Phase() => 2 * Math.PI * _random.NextDouble();
}
