namespace FakeBench.Physics;

/// <summary>The whole half bridge: bench, what sits in the low place, what sits in the high place.</summary>
/// <param name="Bench">Load, bank, shunt, driver, supply.</param>
/// <param name="Low">The place that fires.</param>
/// <param name="High">The place that freewheels.</param>
public sealed record CircuitParameters(BenchParts Bench, PlaceParts Low, PlaceParts High)
{
    /// <summary>Whether the load goes to the negative rail: then the high place of the bench is the one that fires, and
    /// the signals carry its name.</summary>
    public bool LoadToNegative { get; init; }

    /// <summary>A sound WD-1200S-25 in one place, with its nominal values.</summary>
    public static PlaceParts NominalPlace(bool high) => new(
        new SwitchParts
        {
            Threshold = 3.4,
            ThresholdSoftness = 0.12,
            Transconductance = 11,
            TriodeFactor = 0.7,
            DrainResistance = 16e-3,
            SourceResistance = 1.5e-3,
            GateResistance = 3,
            GateSource = 4.5e-9,
            GateDrainMinimum = 18e-12,
            GateDrainMaximum = 900e-12,
            GateDrainSteepness = 0.25,
            JunctionCapacitance = 2.6e-9,
            JunctionVoltage = 1.5,
            JunctionGrading = 0.48,
            FixedCapacitance = 250e-12,
            Breakdown = 1550,
            AvalancheResistance = 0.5,
            Leakage = 10e-9,
        },
        new DiodeParts
        {
            InjectionCurrent = 2e-15,
            EmissionVoltage = 77.6e-3,
            TransitTime = 16e-9,
            Lifetime = 18e-9,
            SeriesResistance = 10e-3,
        },
        high ? new PackageParts(16e-9, 60, 2e-9, 2e-3) : new PackageParts(8e-9, 60, 2e-9, 2e-3));

    /// <summary>The shipped bench with a nominal WD-1200S-25 in both places.</summary>
    public static CircuitParameters Nominal { get; } =
        new(new BenchParts(), NominalPlace(high: false), NominalPlace(high: true));
}
