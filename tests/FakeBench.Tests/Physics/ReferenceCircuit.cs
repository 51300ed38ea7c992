using FakeBench.Physics;

namespace FakeBench.Tests.Physics;

/// <summary>A circuit of tests/reference/waveforms/decks, with its deck's own component values.</summary>
internal sealed record ReferenceCircuit(string Name, CircuitParameters Parts, PulseTrain Train, double Length)
{
    /// <summary>The decks' driver starts its first edge here, s.</summary>
    public const double On1 = 0.6e-6;

    // kT/q at the decks' 27 °C, V.
    private const double Thermal = 0.0258649;

    private static readonly SwitchParts Hv650 = new()
    {
        Threshold = 3.6,
        ThresholdSoftness = 0.1,
        Transconductance = 14,
        TriodeFactor = 0.7,
        DrainResistance = 45e-3,
        SourceResistance = 2e-3,
        GateResistance = 2,
        GateSource = 1900e-12,
        GateDrainMinimum = 8e-12,
        GateDrainMaximum = 900e-12,
        GateDrainSteepness = 0.3,
        JunctionCapacitance = 2400e-12,
        JunctionVoltage = 0.9,
        JunctionGrading = 0.5,
        FixedCapacitance = 0,
        Leakage = 0,
    };

    private static readonly BenchParts Hv650Bench = new()
    {
        LoadInductance = 100e-6,
        LoadResistance = 0.06,
        SaturationFlux = double.PositiveInfinity,
        WindingCapacitance = 15e-12,
        WindingResistance = 60,
        BankCapacitance = 30e-6,
        BankResistance = 0.02,
        BankInductance = 6e-9,
        BankDamping = 20,
        BleederResistance = 1e12,
        SupplyResistance = 20,
        SupplyCurrentLimit = 1e3,
        ShuntResistance = 0.025,
        ShuntInductance = 0.1e-9,
        GateOnResistance = 12,
        GateOffResistance = 8,
        HighGateResistance = 4,
        GateInductance = 2e-9,
        DriverEdge = 5e-9,
    };

    private static readonly PlaceParts Hv650Low = new(Hv650, DiodeParts.None, new PackageParts(5e-9, 22, 1e-9, 0));

    private static readonly PlaceParts Hv650High = new(
        Hv650 with { FixedCapacitance = 60e-12 },
        new DiodeParts
        {
            InjectionCurrent = 1.60714286e-10,
            EmissionVoltage = 1.8 * Thermal,
            TransitTime = 28e-9,
            Lifetime = 45e-9,
            SeriesResistance = 15e-3,
            JunctionCapacitance = 1.5e-9,
            JunctionVoltage = 0.9,
            JunctionGrading = 0.5,
        },
        new PackageParts(10e-9, 22, 1e-9, 0));

    public static ReferenceCircuit Of(string name) => name switch
    {
        "hv650soft" => new(name, new(Hv650Bench, Hv650Low, Hv650High),
            new PulseTrain(5e-6, 3e-6, 1.6e-6, 12, 0, 400), 10.2e-6),
        "saturating" => new(name, new(Hv650Bench with { SaturationFlux = 2.25e-3 }, Hv650Low, Hv650High),
            new PulseTrain(5e-6, 3e-6, 0.7e-6, 12, 0, 400), 9.3e-6),
        "shorted" => new(name, new(Hv650Bench, Hv650Low, Hv650High with
        {
            // 6 mOhm and nothing else in the place.
            Switch = Hv650High.Switch with
            {
                Leakage = 1 / 6e-3,
                Transconductance = 0,
                JunctionCapacitance = 0,
                FixedCapacitance = 1e-12,
                GateDrainMinimum = 1e-15,
                GateDrainMaximum = 2e-15,
            },
            Diode = DiodeParts.None,
        }), new PulseTrain(0.6e-6, 2e-6, 0.8e-6, 12, 0, 400), 4e-6),
        "lv40" => LowVoltage(),
        _ => throw new ArgumentOutOfRangeException(nameof(name)),
    };

    /// <summary>The whole train on a fine grid.</summary>
    public Waveforms Solve(double interval, double tolerance = HalfBridge.DefaultTolerance) =>
        Waveforms.Of(HalfBridge.Simulate(Parts, Train, -On1, interval, (int)((Length + On1) / interval), tolerance));

    private static ReferenceCircuit LowVoltage()
    {
        var low = new SwitchParts
        {
            Threshold = 2.6,
            ThresholdSoftness = 0.1,
            Transconductance = 60,
            TriodeFactor = 0.6,
            DrainResistance = 1.6e-3,
            SourceResistance = 0.4e-3,
            GateResistance = 0.8,
            GateSource = 4000e-12,
            GateDrainMinimum = 60e-12,
            GateDrainMaximum = 1200e-12,
            GateDrainSteepness = 1.2,
            JunctionCapacitance = 1400e-12,
            JunctionVoltage = 0.7,
            JunctionGrading = 0.45,
            FixedCapacitance = 0,
            Leakage = 0,
        };
        var diode = new DiodeParts
        {
            InjectionCurrent = 6.33333333e-10,
            EmissionVoltage = 1.3 * Thermal,
            TransitTime = 1.2e-9,
            Lifetime = 3.8e-9,
            SeriesResistance = 1.5e-3,
            JunctionCapacitance = 1.4e-9,
            JunctionVoltage = 0.7,
            JunctionGrading = 0.42,
        };
        var bench = new BenchParts
        {
            LoadInductance = 4e-6,
            LoadResistance = 0.004,
            SaturationFlux = double.PositiveInfinity,
            WindingCapacitance = 15e-12,
            WindingResistance = 10,
            BankCapacitance = 220e-6,
            BankResistance = 0.002,
            BankInductance = 1e-9,
            BankDamping = 10,
            BleederResistance = 1e12,
            SupplyResistance = 10,
            SupplyCurrentLimit = 1e3,
            ShuntResistance = 0.002,
            ShuntInductance = 0.05e-9,
            GateOnResistance = 33,
            GateOffResistance = 5,
            HighGateResistance = 1.5,
            GateInductance = 2e-9,
            DriverEdge = 3e-9,
        };
        return new("lv40", new(bench,
            new PlaceParts(low, DiodeParts.None, new PackageParts(1.2e-9, 15, 0.15e-9, 0)),
            new PlaceParts(low with { FixedCapacitance = 20e-12 }, diode, new PackageParts(2e-9, 15, 0.15e-9, 0))),
            new PulseTrain(5e-6, 1.6e-6, 1e-6, 10, 0, 20), 8.2e-6);
    }
}
