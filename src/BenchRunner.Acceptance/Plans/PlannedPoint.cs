using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Plans;

/// <summary>What will be done at one operating point. All values SI.</summary>
public sealed record PlannedPoint
{
    /// <summary>The operating point.</summary>
    public required OperatingPoint Point { get; init; }

    /// <summary>Width of the first pulse, s: t1 from L·I/V with resistance and droop.</summary>
    public required double FirstPulse { get; init; }

    /// <summary>Energy in the bank, J.</summary>
    public required double StoredEnergy { get; init; }

    /// <summary>Energy in the load inductor at its largest current, J.</summary>
    public required double LoadEnergy { get; init; }

    /// <summary>Expected droop over the first pulse, 1.</summary>
    public required double BusDroop { get; init; }

    /// <summary>Junction rise of both places; null where no thermal impedance is stated.</summary>
    public required JunctionRise? JunctionRise { get; init; }

    /// <summary>Load current at the second turn-off, A.</summary>
    public required double Off2Current { get; init; }

    /// <summary>Expected peak voltage at the second turn-off, V.</summary>
    public required double Off2PeakVoltage { get; init; }

    /// <summary>Sample interval, s.</summary>
    public required double SampleInterval { get; init; }

    /// <summary>Samples a channel.</summary>
    public required int Samples { get; init; }

    /// <summary>Time from the first sample to the trigger, s.</summary>
    public required double Pretrigger { get; init; }

    /// <summary>Ranges of the recorded channels.</summary>
    public required IReadOnlyList<PlannedRange> Ranges { get; init; }

    /// <summary>Time from a train until the inductor has no current and the bus is back, s.</summary>
    public required double Recovery { get; init; }

    /// <summary>Settling time of the ring (envelope to 1 %), s, by expectation.</summary>
    public required double RingDecay { get; init; }
}
