using BenchRunner.Soak.Simulated;
using FakeBench.Faults;

namespace BenchRunner.Soak.Mixes;

/// <summary>Which faults no device may be accepted under.</summary>
internal static class FaultEffects
{
    /// <summary>With one of these in force a device is not measured as it should be, or the bench is not safe.</summary>
    private static readonly HashSet<string> _never =
    [
        FaultCatalogue.InterlockOpens, FaultCatalogue.EmergencyStop, FaultCatalogue.SupplyClips,
        FaultCatalogue.OverVoltageTrips, FaultCatalogue.BusStaysUp, FaultCatalogue.SilentSupply,
        FaultCatalogue.FireUnanswered, FaultCatalogue.DeviceDies, FaultCatalogue.NoisyProbe,
        FaultCatalogue.ProbeFactorChanges, FaultCatalogue.LongPulse, FaultCatalogue.WeakGateDriver,
        FaultCatalogue.HighOffLevel, FaultCatalogue.GateLifts, FaultCatalogue.InductorFarOff,
        FaultCatalogue.NeverCompletes, FaultCatalogue.BleederWeak, FaultCatalogue.SupplyOvershoots,
        FaultCatalogue.ProbeOff, FaultCatalogue.ProbesSwapped, FaultCatalogue.Arcing, FaultCatalogue.Desaturates,
        FaultCatalogue.GateStuckOn, FaultCatalogue.FiresOnArm, FaultCatalogue.FiresTwice, FaultCatalogue.DriverLost,
        FaultCatalogue.FuseOpens, FaultCatalogue.VoltmeterOpen, FaultCatalogue.ReadingSticks,
        FaultCatalogue.SecondController,
    ];

    /// <summary>These happen once, and must then be found in what the run said.</summary>
    private static readonly HashSet<string> _counted =
    [
        FaultCatalogue.StaleRecord, FaultCatalogue.TriggerMissed, FaultCatalogue.ClippedRange,
        FaultCatalogue.ShortRecord, FaultCatalogue.WeakSignal, FaultCatalogue.ProbeDrift, FaultCatalogue.ShortPulse,
        FaultCatalogue.ShortGap, FaultCatalogue.BankWeak, FaultCatalogue.WrongScale,
        LinkFault.Drops, LinkFault.LateReply, LinkFault.ReplyTwice, LinkFault.ReplyLost, LinkFault.BlockCut,
        LinkFault.BlockDigits, LinkFault.BlockLong, LinkFault.Garbage, LinkFault.QueueOverflow, LinkFault.Reboot,
    ];

    /// <summary>These spoil trains; one that begins after the last spoils nothing.</summary>
    private static readonly HashSet<string> _ofTrains =
    [
        FaultCatalogue.FireUnanswered, FaultCatalogue.DeviceDies, FaultCatalogue.LongPulse, FaultCatalogue.WeakGateDriver,
        FaultCatalogue.HighOffLevel, FaultCatalogue.GateLifts, FaultCatalogue.InductorFarOff,
        FaultCatalogue.NeverCompletes, FaultCatalogue.ProbeOff, FaultCatalogue.Arcing, FaultCatalogue.GateStuckOn,
        FaultCatalogue.FiresTwice, FaultCatalogue.DriverLost,
    ];

    /// <summary>These are there from the train after the one that they begin with: the pulser is armed before that one is
    /// fired, and the scope's factor changes once its record is made.</summary>
    private static readonly HashSet<string> _fromTheNextTrain =
        [FaultCatalogue.FiresOnArm, FaultCatalogue.ProbeFactorChanges];

    /// <summary>These are not to be seen in a proving train, and spoil none: the probe picks its noise up from 100 V on; a
    /// tenth of the device's current is more than the 2 A; another controller's few percent are within what a proving
    /// train is judged by.</summary>
    private static readonly HashSet<string> _ofMeasuredTrains =
        [FaultCatalogue.NoisyProbe, FaultCatalogue.Desaturates, FaultCatalogue.SecondController];

    /// <summary>These act at once and on the bank; below 60 V its next voltage is set anew, and the safe state sets
    /// 0 V.</summary>
    private static readonly HashSet<string> _ofTheBus =
        [FaultCatalogue.SecondController, FaultCatalogue.SupplyOvershoots];

    /// <summary>These take the discharge away, or the proof that the bus is down; one that begins below 60 V after the last
    /// train has nothing left to hold up or to hide.</summary>
    private static readonly HashSet<string> _ofTheWayDown =
    [
        FaultCatalogue.VoltmeterOpen, FaultCatalogue.FuseOpens, FaultCatalogue.ReadingSticks, FaultCatalogue.BleederWeak,
        FaultCatalogue.BusStaysUp,
    ];

    /// <summary>Whether a device that was accepted should not have been.</summary>
    /// <param name="fault">A fault that has begun.</param>
    /// <param name="mix">The mix.</param>
    /// <param name="hasTrace">Whether the run said that anything was out of order.</param>
    /// <param name="bench">The bench after the run.</param>
    public static bool Forbids(string fault, Mix mix, bool hasTrace, MemoryBench bench)
    {
        string name = fault.Split('/')[^1];
        bool wasLow = bench.VoltsAtBeginOf(fault) < 60;
        bool isHarmless = (_ofTrains.Contains(name) && bench.FiresUnder(fault) == 0)
            || (_fromTheNextTrain.Contains(name) && bench.FiresAfter(fault) == 0)
            || (_ofMeasuredTrains.Contains(name) && bench.MeasuredUnder(fault) == 0)
            || (_ofTheBus.Contains(name) && wasLow)
            || (_ofTheWayDown.Contains(name) && wasLow && bench.FiresUnder(fault) == 0)
            || (name == FaultCatalogue.SupplyClips && !bench.Bench.Faults.HasActed(fault));
        return (_never.Contains(name) && !isHarmless)
            || (name == FaultCatalogue.SaturatingInductor && mix.Points.Contains("rated"))
            || (_counted.Contains(name) && bench.Bench.Faults.HasActed(fault) && !hasTrace);
    }
}
