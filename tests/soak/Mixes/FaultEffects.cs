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
        FaultCatalogue.FireUnanswered, FaultCatalogue.DeviceDies, FaultCatalogue.NoisyProbe,
        FaultCatalogue.ProbeFactorChanges, FaultCatalogue.LongPulse, FaultCatalogue.WeakGateDriver,
        FaultCatalogue.HighOffLevel, FaultCatalogue.GateLifts, FaultCatalogue.InductorFarOff,
        FaultCatalogue.NeverCompletes, FaultCatalogue.ProbeOff, FaultCatalogue.Arcing, FaultCatalogue.Desaturates,
        FaultCatalogue.GateStuckOn, FaultCatalogue.FiresOnArm, FaultCatalogue.FiresTwice, FaultCatalogue.DriverLost,
        FaultCatalogue.SupplyClips,
    ];

    /// <summary>These take the proof away that the bus is down; one that begins below 60 V after the last train has
    /// nothing left to hide.</summary>
    private static readonly HashSet<string> _ofTheProof =
        [FaultCatalogue.VoltmeterOpen, FaultCatalogue.FuseOpens, FaultCatalogue.ReadingSticks];

    /// <summary>Whether a device that was accepted should not have been.</summary>
    /// <param name="fault">A fault that has begun.</param>
    /// <param name="mix">The mix.</param>
    /// <param name="hasTrace">Whether the run said that anything was out of order.</param>
    /// <param name="bench">The bench after the run.</param>
    public static bool Forbids(string fault, Mix mix, bool hasTrace, MemoryBench bench)
    {
        string name = fault.Split('/')[^1];
        // Another controller's voltage is of no harm where no train was measured with it: the safe state sets 0 V. Below
        // 60 V the proving train is judged by wider bounds than its 5 %, and the first point sets its own voltage.
        bool isSmall = name == FaultCatalogue.SecondController
            && (bench.MeasuredAfter(fault) == 0 || bench.VoltsAtBeginOf(fault) < 60);
        bool afterAll = bench.FiresUnder(fault) == 0;

        // Clips what is set from then on: a bus that is at its highest voltage is set no more.
        bool isSet = name == FaultCatalogue.SupplyClips
            && bench.VoltsAtBeginOf(fault) > 0.9 * (mix.Points.Contains("rated") ? 600 : 400);
        bool isOver = isSmall || isSet || (_ofTrains.Contains(name) && afterAll)
            || (_ofTheProof.Contains(name) && afterAll && bench.VoltsAtBeginOf(fault) < 60);
        return (_never.Contains(name) && !isOver)
            || (name == FaultCatalogue.SaturatingInductor && mix.Points.Contains("rated"))
            || (_counted.Contains(name) && bench.Bench.Faults.HasActed(fault) && !hasTrace);
    }
}
