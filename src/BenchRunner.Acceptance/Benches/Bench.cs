using BenchRunner.Acceptance.Files;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Benches;

/// <summary>Instruments and fixture as one bench file describes them. All values SI.</summary>
public sealed record Bench
{
    /// <summary>Bits of the scope where the file does not say.</summary>
    public const int UsualScopeBits = 8;

    /// <summary>Shortest sample interval where the file does not say, s.</summary>
    public const double UsualScopeInterval = 1e-9;

    /// <summary>Samples a channel where the file does not say.</summary>
    public const int UsualScopeMemory = 1_000_000;

    /// <summary>Name, e.g. <c>fake</c>.</summary>
    public required string Name { get; init; }

    /// <summary>The fake bench that <c>run</c> starts; null: real instruments, or a fake started by hand.</summary>
    public FakeSettings? Fake { get; init; }

    /// <summary>Role (<c>supply pulser scope voltmeter interlock</c>, perhaps <c>hotplate</c>) to its
    /// instrument.</summary>
    public required IReadOnlyDictionary<string, InstrumentSetup> Roles { get; init; }

    /// <summary>Whether devices are exchanged by hand through the enclosure.</summary>
    public bool ExchangeByHand { get; init; }

    /// <summary>Load inductance, H.</summary>
    public required double LoadInductance { get; init; }

    /// <summary>Resistance of the load inductor, Ω.</summary>
    public required double LoadResistance { get; init; }

    /// <summary>Whether the load goes to the positive rail: the low switch fires; false: the high one.</summary>
    public bool LoadToPositive { get; init; } = true;

    /// <summary>Bus capacitance, F.</summary>
    public required double BusCapacitance { get; init; }

    /// <summary>What the interlock's bleeder relay connects across the bank, Ω.</summary>
    public required double Bleeder { get; init; }

    /// <summary>Current that the bench draws at the bus with an empty socket, A.</summary>
    public double EmptySocketCurrent { get; init; }

    /// <summary>Current limit that the supply is given while charging, A.</summary>
    public required double ChargingCurrent { get; init; }

    /// <summary>Stated accuracy of the supply's current read-back, A; null: not stated.</summary>
    public double? SupplyCurrentAccuracy { get; init; }

    /// <summary>Commutation-loop inductance, H.</summary>
    public required double LoopInductance { get; init; }

    /// <summary>Turn-on gate resistor fitted, Ω.</summary>
    public required double GateResistorOn { get; init; }

    /// <summary>Turn-off gate resistor fitted, Ω.</summary>
    public required double GateResistorOff { get; init; }

    /// <summary>Gate voltage of the high side above which a false turn-on is found, V; null: not stated.</summary>
    public double? HighSideThreshold { get; init; }

    /// <summary>The current shunt; null: none.</summary>
    public Shunt? Shunt { get; init; }

    /// <summary>The recorded channels by their scope input.</summary>
    public required IReadOnlyList<ChannelSetup> Channels { get; init; }

    /// <summary>Fewest bits of the scope's ADC that count for quantisation.</summary>
    public int ScopeBits { get; init; } = UsualScopeBits;

    /// <summary>Shortest sample interval of the scope, s.</summary>
    public double ScopeFastestInterval { get; init; } = UsualScopeInterval;

    /// <summary>Largest record of the scope, samples a channel.</summary>
    public int ScopeMemory { get; init; } = UsualScopeMemory;

    /// <summary>The hard ceiling.</summary>
    public required Envelope Envelope { get; init; }

    /// <summary>When the bank counts as down, and how soon silence counts as a fault.</summary>
    public SafetySettings Safety { get; init; } = SafetySettings.Usual;

    /// <summary>Ambient temperature, degC.</summary>
    public required double Ambient { get; init; }

    /// <summary>The lab's own lines, shown with the cautions.</summary>
    public IReadOnlyList<string> Cautions { get; init; } = [];

    /// <summary>Where single keys stand, by path (e.g. <c>envelope.voltage</c>), for messages.</summary>
    public IReadOnlyDictionary<string, Place> Keys { get; init; } = new Dictionary<string, Place>();

    /// <summary>The exact bytes it was read from.</summary>
    public required SourceFile Source { get; init; }
}
