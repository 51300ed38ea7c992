namespace BenchRunner.Acceptance.Sequences;

/// <summary>Bounds of the validity criteria and their defaults; relative ones as fractions.</summary>
public sealed record ValidityBounds
{
    /// <summary><c>bus-within</c>: bus voltage against the point's, 1.</summary>
    public double BusWithin { get; init; } = 0.01;

    /// <summary><c>bus-droop</c>: droop over the first pulse, 1.</summary>
    public double BusDroop { get; init; } = 0.03;

    /// <summary><c>current-within</c>: i_off against the target, 1.</summary>
    public double CurrentWithin { get; init; } = 0.02;

    /// <summary><c>ramp-straightness</c>: largest mean residual over i_off, 1.</summary>
    public double RampStraightness { get; init; } = 0.02;

    /// <summary><c>noise-below</c>: noise over full scale, 1.</summary>
    public double NoiseBelow { get; init; } = 0.01;

    /// <summary><c>temperature-within</c>: plate against the point's, K.</summary>
    public double TemperatureWithin { get; init; } = 3;

    /// <summary><c>gate-levels</c>: gate levels against the point's, V.</summary>
    public double GateLevels { get; init; } = 0.5;
}
