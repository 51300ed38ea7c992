using static BenchRunner.Signals.Traces.Channel;

namespace BenchRunner.Signals.Quantities;

/// <summary>The catalogue's entries of the firing switch.</summary>
internal static class SwitchQuantities
{
    private const string VoltageTimes = "IEC 60747-8";
    private const string CurrentTimes = "IEC 60747-9";

    /// <summary>Where the current's rise at turn-on begins.</summary>
    internal const string TenPercentRise = "10 % of i_on (the last rise through it before half of i_on: the gate's own "
        + "current may cross it first)";

    /// <summary>The entries, in the catalogue's order.</summary>
    public static IReadOnlyList<Quantity> All { get; } =
    [
        new("vds_on", "V", QuantityOwner.Switch, "On-state voltage at the end of the first pulse. A probe that "
                + "recovers slowly from the blocking voltage reads too high.",
            [new("levels/window", "Mean of vds_low over the last tenth of the first pulse, to the departure of off1.",
                [VgsLow, VdsLow])]),
        new("td_on", "s", QuantityOwner.Switch, "Turn-on delay. An inductive dip can leave the level undecided.",
            [
                new("mos/10-90", $"Departure of on2 to vds_low falling through 90 % ({VoltageTimes}).",
                    [VgsLow, VdsLow]),
                new("igbt/10-10", $"Departure of on2 to id_low rising through {TenPercentRise} ({CurrentTimes}).",
                    [VgsLow, VdsLow, IdLow]),
            ],
            IgbtDefault: "igbt/10-10"),
        new("tr", "s", QuantityOwner.Switch, "Rise time: of a MOSFET the fall time of its voltage. A probe slower "
                + "than the edge measures itself.",
            [
                new("mos/90-10", $"vds_low falls from 90 % to 10 % ({VoltageTimes}).", [VgsLow, VdsLow]),
                new("igbt/10-90", $"id_low rises from {TenPercentRise} to 90 % ({CurrentTimes}).",
                    [VgsLow, VdsLow, IdLow]),
            ],
            IgbtDefault: "igbt/10-90"),
        new("td_off", "s", QuantityOwner.Switch, "Turn-off delay. Skew between the two probes adds in full.",
            [
                new("mos/90-10", $"Departure of off1 to vds_low rising through 10 % ({VoltageTimes}).",
                    [VgsLow, VdsLow]),
                new("igbt/90-90", $"Departure of off1 to id_low falling through 90 % of i_off ({CurrentTimes}).",
                    [VgsLow, IdLow]),
            ],
            IgbtDefault: "igbt/90-90"),
        new("tf", "s", QuantityOwner.Switch, "Fall time: of a MOSFET the rise time of its voltage. A probe slower "
                + "than the edge measures itself.",
            [
                new("mos/10-90", $"vds_low rises from 10 % to 90 % ({VoltageTimes}).", [VgsLow, VdsLow]),
                new("igbt/90-10", $"id_low falls from 90 % to 10 % of i_off ({CurrentTimes}).", [VgsLow, IdLow]),
            ],
            IgbtDefault: "igbt/90-10"),
        new("eon", "J", QuantityOwner.Switch,
            "Energy lost at turn-on, the diode's recovery included. A current late by δ lowers it by V I δ and more.",
            [
                new("e/10-10", $"∫ vds_low id_low dt from id_low = {TenPercentRise} to vds_low = 10 % of its step "
                    + $"({VoltageTimes}; limits not verified).",
                    [VgsLow, VdsLow, IdLow]),
                new("e/10-2", $"The same start, to vds_low = 2 % of its step ({CurrentTimes}; limits not verified).",
                    [VgsLow, VdsLow, IdLow]),
            ],
            IgbtDefault: "e/10-2"),
        new("eoff", "J", QuantityOwner.Switch,
            "Energy lost at turn-off, the output capacitance's charge included. A current late by δ adds V I δ; where "
                + "its rest is read moves it by percents.",
            [
                new("e/10-10", "∫ vds_low id_low dt from vds_low = 10 % of its step to id_low = 10 % of i_off "
                    + $"({VoltageTimes}; limits not verified).",
                    [VgsLow, VdsLow, IdLow]),
                new("e/10-2", "The same, to id_low = 2 % of i_off: with an IGBT's tail "
                    + $"({CurrentTimes}; limits not verified). Often within the noise.", [VgsLow, VdsLow, IdLow]),
            ],
            IgbtDefault: "e/10-2"),
        new("dvdt_on", "V/s", QuantityOwner.Switch, "Slope of the voltage at turn-on, as a magnitude. A mean, not "
            + "the steepest slope: that one is mostly noise and bandwidth.", Slopes()),
        new("dvdt_off", "V/s", QuantityOwner.Switch, "Slope of the voltage at turn-off, as a magnitude. A mean, not "
            + "the steepest slope.", Slopes()),
        new("didt_on", "A/s", QuantityOwner.Switch, "Slope of the current at turn-on. A shunt's inductance makes it "
                + "look early, a slow current probe flat.",
            [new("slope/10-90", $"Mean slope of id_low between {TenPercentRise} and 90 %.", [VgsLow, VdsLow, IdLow])]),
        new("didt_off", "A/s", QuantityOwner.Switch, "Slope of the current at turn-off, as a magnitude. A slow "
                + "current probe flattens it.",
            [new("slope/90-10", "Mean slope of id_low between 90 % and 10 % of i_off.", [VgsLow, IdLow])]),
        new("vds_peak_off", "V", QuantityOwner.Switch, "Peak voltage at turn-off, at the probe's terminals: "
                + "the chip sees more. Bandwidth takes some percent off, noise adds to a raw peak.",
            [
                new("peak/raw", "Maximum of vds_low after off1, by the parabola through the top three samples.",
                    [VgsLow, VdsLow]),
                new("peak/parabola-20", "Least-squares parabola over the samples above bus_voltage + 80 % of the "
                    + "excursion; for noise above 0.2 % of the peak.", [VgsLow, VdsLow]),
            ]),
        new("vds_overshoot_off", "V", QuantityOwner.Switch, "Peak voltage at turn-off above the bus. A small "
                + "difference of large numbers: the gains of two probes are in it.",
            [new("peak/raw", "vds_peak_off − bus_voltage; without vbus, less the mean of vds_low over the last third "
                + "of the ring's window.", [VgsLow, VdsLow])]),
    ];

    private static QuantityDefinition[] Slopes() =>
    [
        new("slope/20-80", "Mean slope of vds_low between 20 % and 80 % of its step.", [VgsLow, VdsLow]),
        new("slope/10-90", "The same between 10 % and 90 %.", [VgsLow, VdsLow]),
    ];
}
