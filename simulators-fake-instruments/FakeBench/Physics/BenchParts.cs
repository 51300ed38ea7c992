namespace FakeBench.Physics;

/// <summary>What belongs to the bench and not to the device: load, bank, shunt, gate driver, supply.</summary>
public sealed record BenchParts
{
    /// <summary>Load inductance at small current L0, H.</summary>
    public double LoadInductance { get; init; } = 120e-6;

    /// <summary>Load resistance, Ohm.</summary>
    public double LoadResistance { get; init; } = 0.05;

    /// <summary>Flux phis of saturation, Wb: iL = phi/L0 (1 + (phi/phis)^8).</summary>
    public double SaturationFlux { get; init; } = 15e-3;

    /// <summary>Capacitance Cw of winding and cable, F.</summary>
    public double WindingCapacitance { get; init; } = 25e-12;

    /// <summary>Resistance Rw in series with it, Ohm; above 0.</summary>
    public double WindingResistance { get; init; } = 40;

    /// <summary>Bank capacitance C, F.</summary>
    public double BankCapacitance { get; init; } = 50e-6;

    /// <summary>Bank series resistance, Ohm.</summary>
    public double BankResistance { get; init; } = 4e-3;

    /// <summary>Bank series inductance, H; above 0.</summary>
    public double BankInductance { get; init; } = 8e-9;

    /// <summary>Resistance Rx across the two above (snubber, eddy loss of the bus bars), Ohm.</summary>
    public double BankDamping { get; init; } = 8;

    /// <summary>Resistance that always lies across the bank, Ohm.</summary>
    public double BleederResistance { get; init; } = 100e3;

    /// <summary>Output resistance of the supply, Ohm.</summary>
    public double SupplyResistance { get; init; } = 20;

    /// <summary>Current limit of the supply, A.</summary>
    public double SupplyCurrentLimit { get; init; } = 0.5;

    /// <summary>Shunt resistance, Ohm.</summary>
    public double ShuntResistance { get; init; } = 5e-3;

    /// <summary>Inductance that the shunt adds to the loop, H.</summary>
    public double ShuntInductance { get; init; } = 0.2e-9;

    /// <summary>Inductance that its sense leads see, H: a coaxial shunt's is far below what it adds to the
    /// loop.</summary>
    public double ShuntSenseInductance { get; init; } = 5e-12;

    /// <summary>Gate resistor of the low place on the way up, Ohm.</summary>
    public double GateOnResistance { get; init; } = 4.7;

    /// <summary>Gate resistor of the low place on the way down, Ohm.</summary>
    public double GateOffResistance { get; init; } = 2.2;

    /// <summary>Gate resistor that holds the high place off, Ohm.</summary>
    public double HighGateResistance { get; init; } = 2.2;

    /// <summary>Inductance of each gate loop, H; above 0.</summary>
    public double GateInductance { get; init; } = 3e-9;

    /// <summary>Duration of the driver's edge, s; above 0.</summary>
    public double DriverEdge { get; init; } = 6e-9;
}
