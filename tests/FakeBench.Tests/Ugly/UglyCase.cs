using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Tests.Ugly;

/// <summary>One deliberately ugly record: a sound train, what spoils it, and how it is recorded.</summary>
/// <param name="Name">Name of its files.</param>
/// <param name="What">What is ugly about it.</param>
/// <param name="Train">The pulses.</param>
/// <param name="Start">Time of the first sample, s after on1.</param>
/// <param name="Interval">Sample interval, s.</param>
/// <param name="Points">Samples a channel.</param>
internal sealed record UglyCase(
    string Name, string What, PulseTrain Train, double Start, double Interval, int Points)
{
    /// <summary>The circuit.</summary>
    public CircuitParameters Parts { get; init; } = CircuitParameters.Nominal;

    /// <summary>What happens to the noiseless signals before any probe: it is part of the truth.</summary>
    public Action<TrainTrajectory> Spoil { get; init; } = _ => { };

    /// <summary>Whether a sample at a rail of the converter is written as an infinity.</summary>
    public bool MarksClipped { get; init; }

    /// <summary>The gate loop's resonance: frequency, Hz, and damping, 1; null: none.</summary>
    public (double Frequency, double Damping)? GateResonance { get; init; }

    /// <summary>Each channel's probe and converter, in the file's order.</summary>
    public required IReadOnlyList<(string Channel, ProbeChannel Probe, Digitiser Digitiser)> Channels { get; init; }

    /// <summary>What is stated to the analysis: gain, offset, V or A (null: not stated), and skew, s, of each
    /// channel.</summary>
    public IReadOnlyDictionary<string, (double Gain, double? Offset, double Skew)> Stated { get; init; } =
        new Dictionary<string, (double, double?, double)>();

    /// <summary>How far a value may lie from the truth, 1, and why so far.</summary>
    public required double Tolerance { get; init; }

    /// <summary>Quantities with a tolerance of their own.</summary>
    public IReadOnlyDictionary<string, double> Tolerances { get; init; } = new Dictionary<string, double>();
}
