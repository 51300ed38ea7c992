using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Population;

/// <summary>Makes changes to what they name.</summary>
public static class Changes
{
    private const string Bench = "bench.", Probe = "probe.";

    private static readonly Dictionary<string, Func<PlaceParts, double, PlaceParts>> Places = new()
    {
        ["threshold"] = (p, f) => p with { Switch = p.Switch with { Threshold = p.Switch.Threshold * f } },
        ["transconductance"] =
            (p, f) => p with { Switch = p.Switch with { Transconductance = p.Switch.Transconductance * f } },
        ["drain-resistance"] =
            (p, f) => p with { Switch = p.Switch with { DrainResistance = p.Switch.DrainResistance * f } },
        ["gate-resistance"] =
            (p, f) => p with { Switch = p.Switch with { GateResistance = p.Switch.GateResistance * f } },
        ["gate-drain"] = (p, f) => p with { Switch = GateDrain(p.Switch, f) },
        ["junction-capacitance"] =
            (p, f) => p with { Switch = p.Switch with { JunctionCapacitance = p.Switch.JunctionCapacitance * f } },
        ["fixed-capacitance"] =
            (p, f) => p with { Switch = p.Switch with { FixedCapacitance = p.Switch.FixedCapacitance * f } },
        ["leakage"] = (p, f) => p with { Switch = p.Switch with { Leakage = p.Switch.Leakage * f } },
        ["lifetime"] = (p, f) => p with { Diode = p.Diode with { Lifetime = p.Diode.Lifetime * f } },
        ["injection"] = (p, f) => p with { Diode = p.Diode with { InjectionCurrent = p.Diode.InjectionCurrent * f } },
        ["source-inductance"] =
            (p, f) => p with { Package = p.Package with { SourceInductance = p.Package.SourceInductance * f } },
        ["eddy-resistance"] =
            (p, f) => p with { Package = p.Package with { EddyResistance = p.Package.EddyResistance * f } },
        ["die-area"] = Die,
    };

    /// <summary>A place with the changes to it.</summary>
    /// <param name="place">The place.</param>
    /// <param name="name"><c>low</c> or <c>high</c>; null: a part by itself, to which those of either name are
    /// made.</param>
    /// <param name="changes">The changes.</param>
    public static PlaceParts On(PlaceParts place, string? name, IEnumerable<Change> changes)
    {
        ArgumentNullException.ThrowIfNull(changes);
        foreach (Change change in changes.Where(c => !IsOfBench(c)))
        {
            string[] words = change.Parameter.Split('.', 2);
            place = name is null || words[0] == name ? Places[words[1]](place, change.Factor) : place;
        }

        return place;
    }

    /// <summary>A bench with the changes to it.</summary>
    public static BenchParts On(BenchParts bench, IEnumerable<Change> changes)
    {
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(changes);
        foreach (Change change in changes.Where(c => c.Parameter == Bench + "saturation-flux"))
        {
            bench = bench with { SaturationFlux = bench.SaturationFlux * change.Factor };
        }

        return bench;
    }

    /// <summary>A probe with the changes to it.</summary>
    /// <param name="probe">The probe.</param>
    /// <param name="channel">Its channel, as a bench whose low place fires calls it.</param>
    /// <param name="changes">The changes.</param>
    /// <param name="volts">Bus voltage, V.</param>
    public static ProbeChannel On(ProbeChannel probe, string channel, IEnumerable<Change> changes, double volts)
    {
        ArgumentNullException.ThrowIfNull(probe);
        ArgumentNullException.ThrowIfNull(changes);
        foreach (Change change in changes.Where(c => volts >= c.FromVolts))
        {
            probe = change.Parameter switch
            {
                _ when change.Parameter == $"{Probe}{channel}.gain" => probe with { Gain = probe.Gain * change.Factor },
                _ when change.Parameter == $"{Probe}{channel}.noise" =>
                    probe with { Noise = probe.Noise * change.Factor },
                _ => probe,
            };
        }

        return probe;
    }

    private static bool IsOfBench(Change change) =>
        change.Parameter.StartsWith(Bench, StringComparison.Ordinal)
        || change.Parameter.StartsWith(Probe, StringComparison.Ordinal);

    private static SwitchParts GateDrain(SwitchParts s, double factor) => s with
    {
        GateDrainMinimum = s.GateDrainMinimum * factor,
        GateDrainMaximum = s.GateDrainMaximum * factor,
    };

    // A die of another area: what conducts and what stores grows with it, resistances fall.
    private static PlaceParts Die(PlaceParts place, double factor)
    {
        SwitchParts s = GateDrain(place.Switch, factor);
        return place with
        {
            Switch = s with
            {
                Transconductance = s.Transconductance * factor,
                DrainResistance = s.DrainResistance / factor,
                GateResistance = s.GateResistance / factor,
                GateSource = s.GateSource * factor,
                JunctionCapacitance = s.JunctionCapacitance * factor,
                FixedCapacitance = s.FixedCapacitance * factor,
                Leakage = s.Leakage * factor,
            },
            Diode = place.Diode with
            {
                InjectionCurrent = place.Diode.InjectionCurrent * factor,
                SeriesResistance = place.Diode.SeriesResistance / factor,
            },
        };
    }
}
