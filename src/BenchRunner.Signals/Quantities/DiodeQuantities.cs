using BenchRunner.Signals.Traces;
using static BenchRunner.Signals.Traces.Channel;

namespace BenchRunner.Signals.Quantities;

/// <summary>The catalogue's entries of the freewheeling diode.</summary>
internal static class DiodeQuantities
{
    private const string Capacitance = " Contains the charge of the output capacitance: of a fast device, most of it.";
    private static readonly Channel[] _current = [VgsLow, IdHigh];

    /// <summary>The entries, in the catalogue's order.</summary>
    public static IReadOnlyList<Quantity> All { get; } =
    [
        new("irm", "A", QuantityOwner.Diode, "Peak reverse recovery current." + Capacitance,
            [
                Routed("peak/above-load", "Maximum of irr, by the parabola through the top three samples."),
                Routed("peak/parabola-20", "Least-squares parabola over the samples above 80 % of the maximum; for "
                    + "noise above 0.2 % of it."),
            ]),
        new("trr", "s", QuantityOwner.Diode, "Reverse recovery time. The rule that ends it makes it twice as long or "
                + "half: values of two rules are not compared.",
            [
                Routed("trr/chord-90-25", "From t0, where irr crosses zero upwards, to where the chord through the "
                    + "first 90 % and 25 % of irm after the peak meets zero (IEC 60747-2, -8)."),
                .. Falls("trr", "From t0 to where irr first falls to"),
            ]),
        new("qrr", "C", QuantityOwner.Diode, "Reverse recovery charge." + Capacitance,
            [
                Routed("qrr/chord-90-25", "∫ irr dt from t0 to the end of trr/chord-90-25."),
                .. Falls("qrr", "∫ irr dt from t0 to where irr first falls to"),
                Routed("qrr/to-zero", "∫ irr dt from t0 to where irr first reaches zero after the peak."),
                Routed(DefinitionId.WindowTemplate,
                    "∫ irr dt over a stated time from t0, e.g. qrr/window-100ns (IEC 60747-2, integration time)."),
            ]),
        new("ta", "s", QuantityOwner.Diode, "Part of trr from t0 to the peak. An error of the load line moves t0.",
            Parts()),
        new("tb", "s", QuantityOwner.Diode, "Part of trr from the peak to its end. A flat peak leaves its instant "
            + "uncertain.", Parts()),
        new("softness", "1", QuantityOwner.Diode, "tb / ta: well below 1 for a snappy diode. Noise at a flat peak "
            + "moves both parts.", Parts()),
        new("dirr_dt", "A/s", QuantityOwner.Diode, "Slope of the recovery current's fall, as a magnitude. "
                + "A snappy diode falls within a few samples: bandwidth decides.",
            [Routed("slope/90-25", "Mean slope of irr between 90 % and 25 % of irm after the peak.")]),
        new("dif_dt", "A/s", QuantityOwner.Diode, "Slope of the commutation into the recovery. It sets irm and "
                + "qrr: values at two slopes are not compared.",
            [new("slope/50-50", "Mean slope of id_low between irr = −50 % of i_on and t0.",
                [VgsLow, VdsLow, IdLow, IdHigh], HasRoutes: true)]),
        new("err", "J", QuantityOwner.Diode, "Energy lost in the recovering diode." + Capacitance,
            [new("e/recovery", "∫ vds_high irr dt over the interval of qrr/chord-90-25.",
                [VgsLow, VdsHigh, IdHigh], HasRoutes: true)]),
        HighSidePeak(1, "first"),
        HighSidePeak(2, "second"),
        HighSidePeak(3, "third"),
    ];

    private static QuantityDefinition Routed(string id, string rule) => new(id, rule, _current, HasRoutes: true);

    private static QuantityDefinition[] Falls(string quantity, string rule) =>
        [Fall(quantity, rule, 2), Fall(quantity, rule, 5), Fall(quantity, rule, 10), Fall(quantity, rule, 25)];

    private static QuantityDefinition Fall(string quantity, string rule, int percent) =>
        Routed($"{quantity}/fall-{percent}",
            $"{rule} {percent} % of irm; no value where a local minimum lies too near that level.");

    private static QuantityDefinition[] Parts() =>
    [
        Routed("trr/chord-90-25", "With the end of trr/chord-90-25."),
        Routed("trr/fall-2", "With the end of trr/fall-2."),
        Routed("trr/fall-5", "With the end of trr/fall-5."),
        Routed("trr/fall-10", "With the end of trr/fall-10."),
        Routed("trr/fall-25", "With the end of trr/fall-25."),
    ];

    private static Quantity HighSidePeak(int number, string ordinal) =>
        new($"vds_high_peak_{number}", "V", QuantityOwner.Diode, $"The {ordinal} maximum of vds_high after on2, at the "
                + "probe's terminals. A second mode can add a maximum of its own.",
            [new("peak/ring", $"The {ordinal} maximum above bus_voltage whose prominence is at least max(5 σ, 0.5 % of "
                + "the bus).", [VgsLow, VdsHigh])]);
}
