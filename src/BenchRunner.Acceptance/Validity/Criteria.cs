namespace BenchRunner.Acceptance.Validity;

/// <summary>The catalogue of validity criteria.</summary>
public static class Criteria
{
    /// <summary>Every trace asked for is there, whole.</summary>
    public const string Complete = "complete";

    /// <summary>The capture is a new one.</summary>
    public const string Fresh = "fresh";

    /// <summary>No trace ran into the ADC's rails.</summary>
    public const string NotClipped = "not-clipped";

    /// <summary>Traces fill their ranges.</summary>
    public const string RangeUsed = "range-used";

    /// <summary>The train is the one that was set.</summary>
    public const string TwoPulses = "two-pulses";

    /// <summary>No current before the train.</summary>
    public const string Baseline = "baseline";

    /// <summary>The load current meets its target.</summary>
    public const string CurrentWithin = "current-within";

    /// <summary>The bus meets its target.</summary>
    public const string BusWithin = "bus-within";

    /// <summary>The bank holds the bus.</summary>
    public const string BusDroop = "bus-droop";

    /// <summary>The inductor does not saturate.</summary>
    public const string RampStraightness = "ramp-straightness";

    /// <summary>The freewheeling switch stays off.</summary>
    public const string HighSideOff = "high-side-off";

    /// <summary>The firing switch is fully on.</summary>
    public const string Desaturated = "desaturated";

    /// <summary>The ringing decays before the next edge.</summary>
    public const string Settled = "settled";

    /// <summary>The traces are quiet.</summary>
    public const string NoiseBelow = "noise-below";

    /// <summary>Scope, voltmeter and inductor agree on the bus.</summary>
    public const string BusAgrees = "bus-agrees";

    /// <summary>The plate has its temperature.</summary>
    public const string TemperatureWithin = "temperature-within";

    /// <summary>The gate has its levels.</summary>
    public const string GateLevels = "gate-levels";

    /// <summary>The freewheeling place carries the load's current: asked of proving trains alone.</summary>
    public const string FreewheelingOpen = "freewheeling-open";

    /// <summary>All criteria of a capture, in the order in which they are judged and listed.</summary>
    public static IReadOnlyList<Criterion> All { get; } =
    [
        new(Complete, "retry", "a channel is missing, has fewer samples than asked, or another time base than set",
            "", []),
        new(Fresh, "retry, stop on the third in a row",
            "all codes are those of the last capture, or the scope's acquisition count did not advance", "", []),
        new(NotClipped, "retry with the next range",
            "3 or more samples before the second turn-off lie at a rail of the ADC", "", []),
        new(RangeUsed, "retry with the next range",
            "bus, load current or gate, without edges and ringing, fill less than 25 % of full scale, or less than "
            + "four fifths of what the plan says where that is less", "", []),
        new(TwoPulses, "retry, stop where a pulse is longer than set",
            "the gate's edges are not on, off, on, off, or a width is off by more than 2 % + "
            + "max(10 ns, the slower gate edge)",
            "", []),
        new(Baseline, "retry after waiting",
            "the current before the train is off the zero capture by over 1 % of target", "", []),
        new(CurrentWithin, "retry with a corrected first pulse, stop beyond the correction's bounds",
            "the load current at the first turn-off is away from its target", "2 %", ["i_off"]),
        new(BusWithin, "retry after recharging, stop above the envelope",
            "the bus before the train is away from the point's voltage", "1 %", ["bus_voltage"]),
        new(BusDroop, "retry after recharging", "the first pulse takes more from the bus", "3 %", ["bus_droop"]),
        new(RampStraightness, "retry, stop where the slope grows by more than 20 %",
            "the first ramp bends: the inductor saturates, or a device fails", "2 %", ["ramp_straightness"]),
        new(HighSideOff, "stop",
            "the gate held off rises above the bench's threshold from the second turn-on "
            + "to the end of recovery", "", []),
        new(Desaturated, "stop",
            "the switch's voltage with its gate on is above max(5 % of the bus, "
            + "3 times the stated on-voltage) and hysteresis",
            "", []),
        new(Settled, "retry", "an edge follows another sooner than the planned decay of the ringing", "", []),
        new(NoiseBelow, "retry", "the noise of a channel is above a share of full scale", "1 %", []),
        new(BusAgrees, "stop",
            "the switch's voltage before the train is off the voltmeter's by over 3 %, or ramp slope "
            + "times load inductance off the bus by over 15 %", "", ["ramp_slope"]),
        new(TemperatureWithin, "retry after waiting", "the plate is away from the point's temperature", "3 K", []),
        new(GateLevels, "retry, stop where the off level is more than 0.5 V above what was set",
            "a gate level is away from the point's", "0.5 V", ["vgs_on", "vgs_off"]),
    ];

    /// <summary>The criterion of a name; null where there is none.</summary>
    /// <param name="name">The name.</param>
    public static Criterion? Find(string name) => All.FirstOrDefault(criterion => criterion.Name == name);
}
