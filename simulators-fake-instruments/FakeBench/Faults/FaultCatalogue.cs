namespace FakeBench.Faults;

/// <summary>All faults there are.</summary>
public static class FaultCatalogue
{
    public const string InterlockOpens = "interlock-opens";
    public const string EmergencyStop = "emergency-stop";
    public const string SupplyClips = "supply-clips";
    public const string OverVoltageTrips = "over-voltage-trips";
    public const string BusStaysUp = "bus-stays-up";
    public const string StaleRecord = "stale-record";
    public const string TriggerMissed = "trigger-missed";
    public const string ClippedRange = "clipped-range";
    public const string SilentSupply = "silent-supply";
    public const string FireUnanswered = "fire-unanswered";
    public const string VoltmeterOpen = "voltmeter-open";
    public const string ErrorQueueFull = "error-queue-full";
    public const string WrongIdentity = "wrong-identity";
    public const string SingleClient = "single-client";
    public const string WrongPart = "wrong-part";
    public const string NotExchanged = "not-exchanged";
    public const string DeviceDies = "device-dies";
    public const string ShortRecord = "short-record";
    public const string WeakSignal = "weak-signal";
    public const string NoisyProbe = "noisy-probe";
    public const string ProbeDrift = "probe-drift";
    public const string ProbeFactorChanges = "probe-factor-changes";
    public const string ShortPulse = "short-pulse";
    public const string LongPulse = "long-pulse";
    public const string ShortGap = "short-gap";
    public const string WeakGateDriver = "weak-gate-driver";
    public const string HighOffLevel = "high-off-level";
    public const string GateLifts = "gate-lifts";
    public const string InductorOff = "inductor-off";
    public const string InductorFarOff = "inductor-far-off";
    public const string SaturatingInductor = "saturating-inductor";
    public const string SupplySags = "supply-sags";
    public const string SupplyLow = "supply-low";
    public const string BankWeak = "bank-weak";
    public const string PlateDrifts = "plate-drifts";
    public const string ReadingSticks = "reading-sticks";
    public const string NeverCompletes = "never-completes";
    public const string WrongScale = "wrong-scale";
    public const string SecondController = "second-controller";
    public const string BleederWeak = "bleeder-weak";
    public const string SupplyOvershoots = "supply-overshoots";
    public const string ProbeOff = "probe-off";
    public const string ProbesSwapped = "probes-swapped";
    public const string Arcing = "arcing";
    public const string Desaturates = "desaturates";
    public const string GateStuckOn = "gate-stuck-on";
    public const string FiresOnArm = "fires-on-arm";
    public const string FiresTwice = "fires-twice";
    public const string DriverLost = "driver-lost";
    public const string FuseOpens = "fuse-opens";
    public const string BusRises = "bus-rises";

    /// <summary>Set-point at which <see cref="SupplyClips"/> clips, V.</summary>
    public const double ClipLevel = 350;

    /// <summary>What is left of the swing in <see cref="WeakSignal"/>, 1.</summary>
    public const double WeakSwing = 0.125;

    /// <summary>Noise of <see cref="NoisyProbe"/>, V rms, and the bus voltage from which on it is there, V.</summary>
    public const double ProbeNoise = 30, NoiseFrom = 100;

    /// <summary>Step of the offset in <see cref="ProbeDrift"/>, A.</summary>
    public const double OffsetStep = 0.3;

    /// <summary>What the attenuation is multiplied by in <see cref="ProbeFactorChanges"/>, 1.</summary>
    public const double FactorChange = 10;

    /// <summary>How far the second pulse is off in <see cref="ShortPulse"/> and <see cref="LongPulse"/>, 1.</summary>
    public const double PulseError = 0.05;

    /// <summary>What is left of the gap in <see cref="ShortGap"/>, 1.</summary>
    public const double ShortGapFactor = 1.0 / 15;

    /// <summary>How far a gate level is off, V.</summary>
    public const double LevelError = 1;

    /// <summary>Load inductance over the stated one, 1.</summary>
    public const double OffInductor = 1.05, FarOffInductor = 1.4;

    /// <summary>Saturation flux over a sound inductor's, 1.</summary>
    public const double SaturatingFlux = 0.43;

    /// <summary>How far the bus is below what was set, 1.</summary>
    public const double BusError = 0.02;

    /// <summary>What is left of the bank's capacitance in <see cref="BankWeak"/>, 1.</summary>
    public const double WeakBank = 0.075;

    /// <summary>How far the plate falls in <see cref="PlateDrifts"/>, K.</summary>
    public const double PlateDrift = 6;

    /// <summary>Resistance of the bleeder in <see cref="BleederWeak"/> over a sound one's, 1.</summary>
    public const double WeakBleeder = 10;

    /// <summary>What the supply is set to over what we set in <see cref="SecondController"/>, and the bus over its
    /// set-point in <see cref="SupplyOvershoots"/>, 1.</summary>
    public const double ForeignSetting = 1.05, Overshoot = 1.08;

    /// <summary>Noise of every input in <see cref="Arcing"/>, V or A rms, and of a probe that is off, V rms.</summary>
    public const double ArcNoise = 100, OpenNoise = 0.5;

    /// <summary>What is left of the transconductance in <see cref="Desaturates"/>, 1.</summary>
    public const double Desaturated = 0.02;

    /// <summary>The bank falls below the one and rises to the other in <see cref="BusRises"/>, V.</summary>
    public const double RisesFrom = 40, RisesTo = 90;

    /// <summary>The faults, by name.</summary>
    public static IReadOnlyList<FaultKind> All { get; } =
    [
        new(InterlockOpens, Volts(100), "the enclosure's loop opens: pulses inhibited, supply off, bleeder on"),
        new(EmergencyStop, Volts(100), "the emergency stop is pressed: the same"),
        new(SupplyClips, Moment.Start, "the supply sets at most 350 V, without an error; its read-back shows it"),
        new(OverVoltageTrips, Volts(300), "the supply's over-voltage protection trips and latches: its output is off"),
        new(BusStaysUp, Moment.Start, "the bleeder relay says that it is engaged but connects nothing"),
        new(StaleRecord, Fire(3), "the scope keeps the record and the count of the train before"),
        new(TriggerMissed, Fire(3), "the scope does not see its trigger in one train and waits on"),
        new(ClippedRange, Fire(3), "the scope's amplifiers are at twice their gain in one train: codes stick at "
            + "the ends"),
        new(SilentSupply, Volts(100), "the supply answers nothing any more, though it obeys"),
        new(FireUnanswered, Fire(3), "the pulser fires, then answers nothing any more"),
        new(VoltmeterOpen, Moment.Start, "a lead of the voltmeter is off: it reads 0 V"),
        new(ErrorQueueFull, Moment.Start, "the supply's error queue is full and ends in -350"),
        new(WrongIdentity, Moment.Start, "the supply says that it is a voltmeter"),
        new(SingleClient, Moment.Start, "each instrument serves one client at a time; a second one is closed at once"),
        new(WrongPart, Moment.Start, "the hands insert another part than they were told: one with 0.4 of its die"),
        new(NotExchanged, Moment.Start, "the hands do nothing: the loop never opens, the device before stays in"),
        new(DeviceDies, Fire(3), "the firing device turns into a short 30 ns after the second turn-off of one train"),
        new(ShortRecord, Fire(3), "the scope's last input records half of its samples of one train"),
        new(WeakSignal, Fire(3), "the voltage probe of the freewheeling place makes no contact in one train: an "
            + "eighth of the swing couples through"),
        new(NoisyProbe, Moment.Start, "the same probe picks up noise of 30 V rms from 100 V of bus voltage on"),
        new(ProbeDrift, Fire(3), "the firing place's current probe gains an offset of 0.3 A until it is degaussed"),
        new(ProbeFactorChanges, Fire(3), "after one train the scope's attenuation of the firing place's current is "
            + "ten times what was set"),
        new(ShortPulse, Fire(3), "the second pulse of one train is 5 % too short"),
        new(LongPulse, Fire(3), "the second pulse of one train is 5 % too long"),
        new(ShortGap, Fire(3), "the gap of one train is a fifteenth of what was set"),
        new(WeakGateDriver, Fire(3), "from then on the gate is on at 1 V less than set"),
        new(HighOffLevel, Fire(3), "from then on the gates are off at 1 V more than set"),
        new(GateLifts, Moment.Start, "the driver of the place held off has lost its negative rail: the gate rests "
            + "at 0 V and is lifted above 0.5 V by each turn-on"),
        new(InductorOff, Moment.Start, "the load has 5 % more inductance than stated"),
        new(InductorFarOff, Moment.Start, "the load has 40 % more inductance than stated"),
        new(SaturatingInductor, Moment.Start, "the load saturates at 0.43 of its flux"),
        new(SupplySags, Fire(3), "the bus is 2 % low in one train"),
        new(SupplyLow, Moment.Start, "the supply gives 2 % less than it says that it was set to"),
        new(BankWeak, Fire(3), "in one train the bank has 0.075 of its capacitance: the rest has lost contact"),
        new(PlateDrifts, Fire(3), "a draught cools the hotplate by 6 K, once"),
        new(ReadingSticks, Volts(200), "the voltmeter shows from then on what it shows then"),
        new(NeverCompletes, Fire(3), "from then on the scope's acquisition does not come to its end"),
        new(WrongScale, Fire(3), "one preamble of the scope says twice the volts a step"),
        new(SecondController, Fire(3), "another controller sets the supply 5 % higher"),
        new(BleederWeak, Moment.Start, "the bleeder has ten times its resistance"),
        new(SupplyOvershoots, Volts(300), "the bus goes 8 % above what the supply was set to, once"),
        new(ProbeOff, Fire(3), "from then on the firing place's voltage probe is off: noise about 0 V"),
        new(ProbesSwapped, Moment.Start, "the voltage probes of the two places are swapped"),
        new(Arcing, Fire(3), "an arc: from then on 100 V of noise on every input, and the loop's contact chatters open"),
        new(Desaturates, Fire(3), "from then on the firing device carries a fiftieth of its current: it desaturates"),
        new(GateStuckOn, Fire(3), "the firing gate stays on after the second pulse: the device dies, the bank empties"),
        new(FiresOnArm, Fire(3), "the pulser fires as soon as it is armed, without its trigger"),
        new(FiresTwice, Fire(3), "one trigger fires two trains"),
        new(DriverLost, Fire(3), "the gate drivers lose their supply: both gates rest at 0 V, no train reaches them"),
        new(FuseOpens, Fire(3), "the fuse between bank and voltmeter opens: it shows 0 V, the bank keeps its charge"),
        new(BusRises, Moment.Start, "the bank rises to 90 V once it was below 40 V and bled"),
        .. LinkFault.All,
    ];

    private static Moment Fire(int n) => new(MomentKind.Fire, n);

    private static Moment Volts(double v) => new(MomentKind.Volts, v);
}
