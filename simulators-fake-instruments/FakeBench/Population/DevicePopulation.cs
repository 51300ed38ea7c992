using FakeBench.Physics;

namespace FakeBench.Population;

/// <summary>All devices there are: a few named ones with a known defect, and for any other serial a sound
/// one.</summary>
public static class DevicePopulation
{
    /// <summary>The part that everything here is.</summary>
    public const string Part = "WD-1200S-25";

    private const string Accepted = "accepted", Rejected = "rejected", Undecided = "undecided";

    /// <summary>Devices with a defect: nominal values but for the defect, whatever the seed.</summary>
    public static IReadOnlyList<Device> Named { get; } =
    [
        WithHigh("W1200-9001", "high-qrr", Rejected, h => Lifetime(h, 1.5)),
        WithHigh("W1200-9002", "borderline", Undecided, h => Lifetime(h, 1.25)),
        WithLow("W1200-9003", "high-peak", Rejected,
            l => l with { Package = l.Package with { SourceInductance = 1e-9 } }),
        WithHigh("W1200-9004", "lightly-damped", Rejected,
            h => h with { Package = h.Package with { EddyResistance = 600 } }),
        WithLow("W1200-9005", "leaky", Rejected, l => l with { Switch = l.Switch with { Leakage = 20e-6 } }),
        WithLow("W1200-9006", "high-on-resistance", Rejected,
            l => l with { Switch = l.Switch with { DrainResistance = 1.2 } }),
        WithHigh("W1200-9007", "false-turn-on", Rejected, FalseTurnOn),
        WithLow("W1200-9008", "slow-gate", Rejected, l => l with { Switch = l.Switch with { GateResistance = 8 } }),
        WithLow("W1200-9009", "shorted-low", Rejected, l => l.Shorted()),
        WithHigh("W1200-9010", "shorted-high", Rejected, h => h.Shorted()),
        WithLow("W1200-9011", "open-low", Rejected, l => l with { Switch = l.Switch with { Transconductance = 0 } }),
        WithHigh("W1200-9012", "open-high", Rejected, Open),
        WithLow("W1200-9013", "dies-at-off2", Rejected, l => l with { DiesAfterOff2 = 30e-9 }),
    ];

    /// <summary>The device of a serial.</summary>
    /// <param name="serial">Any text; a named one gives its named device.</param>
    /// <param name="seed">The population: another seed, other sound devices.</param>
    /// <returns>The same device for the same serial and seed.</returns>
    public static Device Draw(string serial, int seed)
    {
        ArgumentNullException.ThrowIfNull(serial);
        foreach (var named in Named)
        {
            if (named.Serial == serial) return named;
        }

        var spread = Spread.Draw(new SplitMix(SplitMix.Key(serial, seed)));
        return new Device(serial, Part, null, Accepted,
            spread.Low(CircuitParameters.NominalPlace(high: false)),
            spread.High(CircuitParameters.NominalPlace(high: true)));
    }

    private static Device WithLow(string serial, string defect, string outcome, Func<PlaceParts, PlaceParts> change) =>
        new(serial, Part, defect, outcome, change(CircuitParameters.NominalPlace(high: false)),
            CircuitParameters.NominalPlace(high: true));

    private static Device WithHigh(string serial, string defect, string outcome, Func<PlaceParts, PlaceParts> change) =>
        new(serial, Part, defect, outcome, CircuitParameters.NominalPlace(high: false),
            change(CircuitParameters.NominalPlace(high: true)));

    private static PlaceParts Lifetime(PlaceParts place, double factor) =>
        place with { Diode = place.Diode with { Lifetime = place.Diode.Lifetime * factor } };

    /// <summary>A low threshold and a large gate-drain capacitance: the voltage's rise turns the part on by
    /// itself.</summary>
    private static PlaceParts FalseTurnOn(PlaceParts place) => place with
    {
        Switch = place.Switch with
        {
            Threshold = 1.5,
            GateDrainMinimum = place.Switch.GateDrainMinimum * 3.3,
            GateDrainMaximum = place.Switch.GateDrainMaximum * 3.3,
            GateResistance = 6,
        },
    };

    /// <summary>A broken bond: nothing but the stray capacitance of the package is left, and it still breaks
    /// down.</summary>
    private static PlaceParts Open(PlaceParts place) => place with
    {
        Switch = place.Switch with
        {
            Transconductance = 0,
            Leakage = 0,
            JunctionCapacitance = 0,
            FixedCapacitance = 5e-12,
            GateDrainMinimum = 0.1e-12,
            GateDrainMaximum = 0.2e-12,
        },
        Diode = DiodeParts.None,
    };
}
