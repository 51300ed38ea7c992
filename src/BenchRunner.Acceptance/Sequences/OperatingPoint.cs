using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>Bus voltage, load current, temperature and gate at which pulses are fired. SI; degC.</summary>
public sealed record OperatingPoint
{
    /// <summary>Name, unique in the sequence; not <c>zero</c>, <c>proving-before</c> or <c>proving-after</c>.</summary>
    public required string Name { get; init; }

    /// <summary>Bus voltage, V.</summary>
    public required double BusVoltage { get; init; }

    /// <summary>Load current at the first turn-off, A.</summary>
    public required double LoadCurrent { get; init; }

    /// <summary>Plate temperature, degC; null: ambient.</summary>
    public double? Temperature { get; init; }

    /// <summary>On level of the gate, V.</summary>
    public required double GateOn { get; init; }

    /// <summary>Off level of the gate, V.</summary>
    public required double GateOff { get; init; }

    /// <summary>Turn-on gate resistance, Ω; null: what is fitted.</summary>
    public double? ResistanceOn { get; init; }

    /// <summary>Turn-off gate resistance, Ω; null: what is fitted.</summary>
    public double? ResistanceOff { get; init; }

    /// <summary>Time between the pulses, s.</summary>
    public required double Gap { get; init; }

    /// <summary>Width of the second pulse, s.</summary>
    public required double SecondPulse { get; init; }

    /// <summary>Least time between the trains of this point, s.</summary>
    public required double RepeatEvery { get; init; }

    /// <summary>Whether the higher points are left out when a limit fails here.</summary>
    public bool ElseSkipHigher { get; init; }

    /// <summary>Where the point stands in the file.</summary>
    public required Place Where { get; init; }

    /// <summary>Where single keys of the point stand (e.g. <c>bus-voltage</c>), for messages.</summary>
    public IReadOnlyDictionary<string, Place> Keys { get; init; } = new Dictionary<string, Place>();
}
