using FakeBench.Physics;

namespace FakeBench.Population;

/// <summary>All devices there are: a few named ones with a known defect, and for any other serial a sound
/// one.</summary>
public static class DevicePopulation
{
    /// <summary>The part that everything here is.</summary>
    public const string Part = "WD-1200S-25";

    /// <summary>The part that the wrong part in the socket is: the same one with a smaller die.</summary>
    public const string WrongPart = "WD-1200S-10";

    /// <summary>What the wrong part is made of.</summary>
    public static IReadOnlyList<Change> WrongPartChanges { get; } =
        [new("low.die-area", 0.4), new("high.die-area", 0.4)];

    private const string Accepted = "accepted", Rejected = "rejected", Undecided = "undecided";
    private const string NotMeasured = "not-measured", Stopped = "stopped";

    // 10 nS and 10 mOhm: from a sound part's leakage to a short.
    private const double Short = 1e10;

    /// <summary>Devices with a known outcome: nominal values but for the defect, whatever the seed.</summary>
    public static IReadOnlyList<Device> Named { get; } =
    [
        Nominal("W1200-9001").With("high-qrr", Rejected, new Change("high.lifetime", 1.5)),
        Nominal("W1200-9002").With("borderline", Undecided, new Change("high.lifetime", 1.25)),
        Nominal("W1200-9003").With("high-peak", Rejected, new Change("low.source-inductance", 0.5)),
        Nominal("W1200-9004").With("lightly-damped", Rejected, new Change("high.eddy-resistance", 10)),
        Nominal("W1200-9005").With("leaky", Rejected, new Change("low.leakage", 2000)),
        Nominal("W1200-9006").With("high-on-resistance", Rejected, new Change("low.drain-resistance", 26)),
        Nominal("W1200-9007").With(
            "false-turn-on", Rejected, new Change("high.threshold", 0.44), new Change("high.gate-drain", 3.3),
            new Change("high.gate-resistance", 2)),
        Nominal("W1200-9008").With("slow-gate", Rejected, new Change("low.gate-resistance", 2.7)),
        Nominal("W1200-9009").With("shorted-low", Rejected, new Change("low.leakage", Short)),
        Nominal("W1200-9010").With("shorted-high", Rejected, new Change("high.leakage", Short)),
        Nominal("W1200-9011").With("open-low", Rejected, new Change("low.transconductance", 0)),
        Nominal("W1200-9012").With(
            "open-high", Rejected, new Change("high.transconductance", 0), new Change("high.injection", 0),
            new Change("high.leakage", 0), new Change("high.junction-capacitance", 0),
            new Change("high.fixed-capacitance", 0.02), new Change("high.gate-drain", 0.001)),
        Nominal("W1200-9013").Dying("dies-at-off2", Rejected, new Death(1, 500)),
        Nominal("W1200-9014").With("gross-on-resistance", Rejected, new Change("low.drain-resistance", 75)),
        Nominal("W1200-9015").With("bench-saturating-inductor", Stopped, new Change("bench.saturation-flux", 0.43)),
        Nominal("W1200-9016").With("bench-probe-left-at-1x", Stopped, new Change("probe.id_low.gain", 0.1)),
        Nominal("W1200-9017").With("bench-noise", NotMeasured, new Change("probe.vds_high.noise", 100, 100)),
        Nominal("W1200-9018").With("bench-wrong-part", Rejected, WrongPartChanges) with { Part = WrongPart },
        // One proving train and twice five captures before it: only the proving train after them sees it.
        Nominal("W1200-9019").Dying("dies-at-the-last-off2", Rejected, new Death(11, 60)),
        Nominal("W1200-9020"),
        Nominal("W1200-9021"),
    ];

    /// <summary>The device of a serial.</summary>
    /// <param name="serial">Any text; a named one gives its named device.</param>
    /// <param name="seed">The population: another seed, other sound devices.</param>
    /// <param name="sound">Whether a named device comes without its defect.</param>
    /// <returns>The same device for the same serial and seed.</returns>
    public static Device Draw(string serial, int seed, bool sound = false)
    {
        ArgumentNullException.ThrowIfNull(serial);
        foreach (var named in Named)
        {
            if (named.Serial == serial) return sound ? Nominal(serial) : named;
        }

        var spread = Spread.Draw(new SplitMix(SplitMix.Key(serial, seed)));
        Device nominal = Nominal(serial);
        return Sound(serial, spread.Low(nominal.Low), spread.High(nominal.High));
    }

    private static Device Nominal(string serial) => Sound(
        serial, CircuitParameters.NominalPlace(high: false), CircuitParameters.NominalPlace(high: true));

    private static Device Sound(string serial, PlaceParts low, PlaceParts high) =>
        new(serial, Part, null, Accepted, low, high) { Alone = (low, high) };
}
