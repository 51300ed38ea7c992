namespace FakeBench.Fixtures;

/// <summary>What a bench is made of when it starts.</summary>
/// <param name="Values">Its component values.</param>
/// <param name="Device">Serial of the device in the socket.</param>
public sealed record BenchSetup(BenchValues Values, string Device)
{
    /// <summary>Seed of population, noise and jitter.</summary>
    public int Seed { get; init; } = 1;

    /// <summary>Serial of the companion in the other place; null: the device fills both.</summary>
    public string? Companion { get; init; }

    /// <summary>Whether the load goes to the negative rail and the high place fires.</summary>
    public bool LoadToNegative { get; init; }

    /// <summary>Whether named devices come without their defect.</summary>
    public bool Sound { get; init; }

    /// <summary>Whether the devices lie on a hotplate.</summary>
    public bool Hotplate { get; init; }

    /// <summary>Whether trains and records are computed beside what goes on, before they are asked for.</summary>
    public bool WorksAhead { get; init; } = true;

    /// <summary>Temperature of the room, degC.</summary>
    public double Ambient { get; init; } = 23;
}
