namespace FakeBench.Fixtures;

/// <summary>What a bench is made of when it starts.</summary>
/// <param name="Values">Its component values.</param>
/// <param name="Device">Serial of the device in the socket.</param>
public sealed record BenchSetup(BenchValues Values, string Device)
{
    /// <summary>Seed of population, noise and jitter.</summary>
    public int Seed { get; init; } = 1;

    /// <summary>Whether the devices lie on a hotplate.</summary>
    public bool Hotplate { get; init; }

    /// <summary>Temperature of the room, degC.</summary>
    public double Ambient { get; init; } = 23;
}
