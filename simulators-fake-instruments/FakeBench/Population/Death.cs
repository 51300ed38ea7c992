using System.Globalization;

namespace FakeBench.Population;

/// <summary>When a device dies: its firing place turns into a short soon after a train's second turn-off.</summary>
/// <param name="Train">The train at the earliest, counted since it was inserted.</param>
/// <param name="Volts">Bus voltage at the least, V.</param>
public sealed record Death(long Train, double Volts)
{
    /// <summary>Delay after the driver's off2, s.</summary>
    public const double Delay = 30e-9;

    /// <summary>Whether it dies in a train.</summary>
    public bool Comes(long train, double volts) => train >= Train && volts >= Volts;

    /// <summary>When, in words.</summary>
    public override string ToString() => string.Create(
        CultureInfo.InvariantCulture,
        $"30 ns after off2 of the first train {(Train > 1 ? $"from the {Train}th on" : $"from {Volts} V on")}");
}
