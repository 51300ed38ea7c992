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
    public const string LinkDrops = "link-drops";
    public const string LateReply = "late-reply";
    public const string SilentSupply = "silent-supply";
    public const string FireUnanswered = "fire-unanswered";
    public const string VoltmeterOpen = "voltmeter-open";
    public const string ErrorQueueFull = "error-queue-full";
    public const string WrongIdentity = "wrong-identity";
    public const string SingleClient = "single-client";

    /// <summary>Set-point at which <see cref="SupplyClips"/> clips, V.</summary>
    public const double ClipLevel = 350;

    /// <summary>How late the reply of <see cref="LateReply"/> is.</summary>
    public static TimeSpan Lateness { get; } = TimeSpan.FromSeconds(4);

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
        new(LinkDrops, Block(9), "the scope's connection is reset in the middle of a block"),
        new(LateReply, Fire(3), "the scope's next reply comes 4 s late"),
        new(SilentSupply, Volts(100), "the supply answers nothing any more, though it obeys"),
        new(FireUnanswered, Fire(3), "the pulser fires, then answers nothing any more"),
        new(VoltmeterOpen, Moment.Start, "a lead of the voltmeter is off: it reads 0 V"),
        new(ErrorQueueFull, Moment.Start, "the supply's error queue is full and ends in -350"),
        new(WrongIdentity, Moment.Start, "the supply says that it is a voltmeter"),
        new(SingleClient, Moment.Start, "each instrument serves one client at a time; a second one is closed at once"),
    ];

    private static Moment Fire(int n) => new(MomentKind.Fire, n);

    private static Moment Volts(double v) => new(MomentKind.Volts, v);

    private static Moment Block(int n) => new(MomentKind.Block, n);
}
