using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>What a capture says about the pulse train itself: the facts that validity rests on, none of them a
/// measurand.</summary>
public sealed record TrainFacts
{
    /// <summary>Every edge of the gate found, in time order, rising and falling alternating.</summary>
    public IReadOnlyList<PulseEdge> Edges { get; init; } = [];

    /// <summary>Whether the edges are exactly turn-on, turn-off, turn-on, turn-off.</summary>
    public bool IsTwoPulses { get; init; }

    /// <summary>First turn-on; null where it is outside the record.</summary>
    public PulseEdge? On1 { get; init; }

    /// <summary>First turn-off; null where it is outside the record.</summary>
    public PulseEdge? Off1 { get; init; }

    /// <summary>Second turn-on; null where it is outside the record.</summary>
    public PulseEdge? On2 { get; init; }

    /// <summary>Second turn-off; null where it is outside the record.</summary>
    public PulseEdge? Off2 { get; init; }

    /// <summary>Width of the first pulse between 50 % crossings, s; null where an edge is missing.</summary>
    public double? FirstPulse => Off1?.At - On1?.At;

    /// <summary>Width of the second pulse between 50 % crossings, s; null where an edge is missing.</summary>
    public double? SecondPulse => Off2?.At - On2?.At;

    /// <summary>Duration of the gate's slower edge, 10 % to 90 %, s; null where it was not seen.</summary>
    public double? GateEdge { get; init; }

    /// <summary>On level of the firing gate, V.</summary>
    public double? GateOn { get; init; }

    /// <summary>Off level of the firing gate, V.</summary>
    public double? GateOff { get; init; }

    /// <summary>Load current at off1 by the ramp fit, A (<c>i_off</c>).</summary>
    public double? OffCurrent { get; init; }

    /// <summary>Slope of the first ramp, A/s (<c>ramp_slope</c>).</summary>
    public double? RampSlope { get; init; }

    /// <summary>Largest |mean residual| over the twentieths of the ramp window over i_off, 1
    /// (<c>ramp_straightness</c>).</summary>
    public double? RampStraightness { get; init; }

    /// <summary>Slope of the last quarter of the ramp window over that of its first third, less 1; a saturating
    /// inductor: +1.08.</summary>
    public double? RampGrowth { get; init; }

    /// <summary>Bus voltage before on1 (mean of vbus, else of vds_low), V.</summary>
    public double? BusBeforeOn1 { get; init; }

    /// <summary>Bus voltage before off1, V; null where vbus is not measured.</summary>
    public double? BusBeforeOff1 { get; init; }

    /// <summary>Mean of the switch's vds before on1, V.</summary>
    public double? BlockingBeforeOn1 { get; init; }

    /// <summary>Mean of the switch's current before on1, as recorded and gain-corrected, before its offset was removed,
    /// A.</summary>
    public double? CurrentBeforeOn1 { get; init; }

    /// <summary>Where the offset that was taken off the switch's current came from.</summary>
    public BaselineSource Baseline { get; init; }

    /// <summary>Largest vds of the switch while its gate is on, from 25 % of a pulse to the departure of its end,
    /// V.</summary>
    public double? OnStateMaximum { get; init; }

    /// <summary>Time of <see cref="OnStateMaximum"/>, s.</summary>
    public double? OnStateMaximumAt { get; init; }

    /// <summary>Hysteresis that section "crossings" gives the switch's vds, V.</summary>
    public double? OnStateHysteresis { get; init; }

    /// <summary>Largest gate voltage of the freewheeling position from on2's departure to the end of the recovery (by
    /// the chord), V; null where it is not measured or no recovery is seen.</summary>
    public double? FreewheelingGateMaximum { get; init; }

    /// <summary>Time of <see cref="FreewheelingGateMaximum"/>, s.</summary>
    public double? FreewheelingGateMaximumAt { get; init; }

    /// <summary>Robust noise of each channel present, V or A (σ).</summary>
    public IReadOnlyDictionary<Channel, double> Noise { get; init; } = new Dictionary<Channel, double>();
}
