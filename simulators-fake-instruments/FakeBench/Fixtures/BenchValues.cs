using FakeBench.Physics;

namespace FakeBench.Fixtures;

/// <summary>Component values of the bench at a pace: what charges and discharges is faster, what switches is
/// not.</summary>
/// <param name="Pace">How much faster than the lab's bench, 1 to 5.</param>
public sealed record BenchValues(double Pace)
{
    /// <summary>Highest set-point of the supply, V.</summary>
    public const double HighestVoltage = 1000;

    /// <summary>What the bench file allows, and where the lab left the supply's over-voltage protection, V.</summary>
    public const double Envelope = 900;

    /// <summary>What drains the bank with an empty socket, Ohm: 0.1 mA at 600 V.</summary>
    public const double EmptySocket = 6e6;

    /// <summary>Load, bank, shunt and gate driver as a train sees them.</summary>
    public BenchParts Parts => new()
    {
        SupplyResistance = SupplyResistance,
        SupplyCurrentLimit = SupplyLimit,
        BleederResistance = EmptySocket,
    };

    /// <summary>What the interlock's relay connects across the bank, Ohm.</summary>
    public double Bleeder => 25e3 / Pace;

    /// <summary>Largest current limit of the supply, A.</summary>
    public double SupplyLimit => 0.5 * Pace;

    /// <summary>Output resistance of the supply, Ohm.</summary>
    public double SupplyResistance => 20 / Pace;

    /// <summary>Heat capacity of the hotplate, J/K.</summary>
    public double PlateCapacity => 800 / Pace;

    /// <summary>Slew rate of the supply, V/s.</summary>
    public double Slew => 1500 * Pace;
}
