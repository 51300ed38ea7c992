using FakeBench.Physics;

namespace FakeBench.Population;

/// <summary>What makes one sound device differ from the nominal one, in standard deviations.</summary>
/// <remarks>One draw serves both places of a device, since both come from one wafer; diode, threshold and
/// transconductance differ between them by another 0.3 of their spread. Everything is cut at three
/// deviations.</remarks>
internal sealed record Spread
{
    private const double Cut = 3, BetweenPlaces = 0.3;

    // Standard deviations: threshold in V, the others relative.
    private const double Threshold = 0.12, Lifetime = 0.06, Transit = 0.06, GateResistance = 0.06, GateDrain = 0.05;
    private const double Transconductance = 0.04, DrainResistance = 0.04, Output = 0.03, GateSource = 0.03;
    private const double Inductance = 0.02, Eddy = 0.08, Injection = 0.10;

    private readonly double[] _common = new double[12];
    private readonly double[] _low = new double[5];
    private readonly double[] _high = new double[5];

    private Spread()
    {
    }

    public static Spread Draw(SplitMix source)
    {
        var spread = new Spread();
        foreach (var row in (double[][])[spread._common, spread._low, spread._high])
        {
            for (int i = 0; i < row.Length; i++) row[i] = source.NextNormalWithin(Cut);
        }

        return spread;
    }

    public PlaceParts Low(PlaceParts nominal) => Of(nominal, _low);

    public PlaceParts High(PlaceParts nominal) => Of(nominal, _high);

    private PlaceParts Of(PlaceParts nominal, double[] own)
    {
        double Shared(int i, double deviation) => 1 + deviation * _common[i];
        double Partly(int i, double deviation) => 1 + deviation * (_common[i] + BetweenPlaces * own[i]);
        var s = nominal.Switch;
        double gateDrain = Shared(7, GateDrain);
        double output = Shared(8, Output);
        return nominal with
        {
            Switch = s with
            {
                Threshold = s.Threshold + Threshold * (_common[0] + BetweenPlaces * own[0]),
                Transconductance = s.Transconductance * Partly(1, Transconductance),
                DrainResistance = s.DrainResistance * Shared(5, DrainResistance),
                GateResistance = s.GateResistance * Shared(6, GateResistance),
                GateDrainMinimum = s.GateDrainMinimum * gateDrain,
                GateDrainMaximum = s.GateDrainMaximum * gateDrain,
                JunctionCapacitance = s.JunctionCapacitance * output,
                FixedCapacitance = s.FixedCapacitance * output,
                GateSource = s.GateSource * Shared(9, GateSource),
            },
            Diode = nominal.Diode with
            {
                Lifetime = nominal.Diode.Lifetime * Partly(2, Lifetime),
                TransitTime = nominal.Diode.TransitTime * Partly(3, Transit),
                InjectionCurrent = nominal.Diode.InjectionCurrent * Partly(4, Injection),
            },
            Package = nominal.Package with
            {
                DrainInductance = nominal.Package.DrainInductance * Shared(10, Inductance),
                EddyResistance = nominal.Package.EddyResistance * Shared(11, Eddy),
            },
        };
    }
}
