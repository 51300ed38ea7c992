using static BenchRunner.Signals.Traces.Channel;

namespace BenchRunner.Signals.Quantities;

/// <summary>The catalogue's entries of bus, gate driver, load and loop.</summary>
internal static class CircuitQuantities
{
    private const string Ramp = "iload/ramp";

    /// <summary>The entries, in the catalogue's order.</summary>
    public static IReadOnlyList<Quantity> All { get; } =
    [
        new("vgs_on", "V", QuantityOwner.Circuit, "On level of the firing gate. In a short pulse it has not settled.",
            [new("levels/histogram", "Upper mode of the gate's histogram from the middle of the first pulse to the "
                + "middle of the gap (IEEE 181 clause 5).", [VgsLow])]),
        new("vgs_off", "V", QuantityOwner.Circuit, "Off level of the firing gate. It drifts by volts after a turn-off.",
            [new("levels/histogram", "Lower mode of the same histogram (IEEE 181 clause 5).", [VgsLow])]),
        new("bus_voltage", "V", QuantityOwner.Circuit, "Bus voltage at the second turn-on. A ring that has not decayed "
                + "is averaged into it.",
            [
                new("levels/window", "Mean of vbus in the 200 ns before the departure of on2.", [VgsLow, Vbus]),
                new("levels/window-vds", "Mean of vds_low there, less the stated forward voltage of the diode: for "
                    + "benches that do not measure vbus.", [VgsLow, VdsLow]),
            ]),
        new("bus_droop", "1", QuantityOwner.Circuit, "What the first pulse takes from the bus. A small difference of "
                + "large numbers: noise shows.",
            [new("droop/first-pulse", "(vbus before on1 − vbus before off1) / vbus before on1, each over 200 ns.",
                [VgsLow, Vbus])]),
        new("ramp_slope", "A/s", QuantityOwner.Circuit,
            "Slope of the load current in the first pulse: bus over inductance. A current probe's gain is in it.",
            [new(Ramp, "Least-squares line from 30 % of the pulse to 5 % before the departure of off1.",
                [VgsLow, IdLow])]),
        new("ramp_straightness", "1", QuantityOwner.Circuit,
            "How far the first ramp is from a straight line; large for a saturating inductor.",
            [new(Ramp, "Largest |mean residual| over the twentieths of the fit window, over i_off.", [VgsLow, IdLow])]),
        new("i_off", "A", QuantityOwner.Circuit, "Load current at the first turn-off. In a saturating inductor "
                + "the line lies below the current.",
            [new(Ramp, "The first ramp's line at off1.", [VgsLow, IdLow])]),
        new("i_on", "A", QuantityOwner.Circuit,
            "Load current at the second turn-on; percents off where the load's winding rings or its core saturates.",
            [new(Ramp, "Line fitted to the second pulse after ringing and recovery, at the instant at which vds_low "
                + "falls through 50 %. Without off2 its slope is that of the first ramp, and there is no value unless "
                + "the current follows it to the record's end.", [VgsLow, VdsLow, IdLow])]),
        new("id_peak_on", "A", QuantityOwner.Circuit, "Peak current at turn-on: load and recovery current "
                + "together. A long second pulse has its maximum at its end.",
            [
                new("peak/raw", "Maximum of id_low after on2, by the parabola through the top three samples.",
                    [VgsLow, IdLow]),
                new("peak/parabola-20", "Least-squares parabola over the samples above i_on + 80 % of the excursion; "
                    + "for noise above 0.2 % of the peak.", [VgsLow, VdsLow, IdLow]),
            ]),
        new("loop_inductance", "H", QuantityOwner.Circuit,
            "Inductance of the commutation loop outside the voltage probes. Skew of the current spoils it.",
            [new("loop/flux", "∫ (bus_voltage − vds_low − vds_high − R id_low) dt / Δid_low between "
                + $"{SwitchQuantities.TenPercentRise} and 90 %; R the stated shunt; −V_F for vds_high where that is not "
                + "measured.", [VgsLow, VdsLow, IdLow])]),
    ];
}
