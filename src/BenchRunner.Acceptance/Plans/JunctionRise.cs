namespace BenchRunner.Acceptance.Plans;

/// <summary>How far a pulse train warms the junctions above the plate, by place.</summary>
/// <param name="Low">Rise of the low place's junction, K.</param>
/// <param name="High">Rise of the high place's junction, K.</param>
public readonly record struct JunctionRise(double Low, double High)
{
    /// <summary>Rise of the warmer one, K.</summary>
    public double Warmer => Math.Max(Low, High);
}
