using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>What the analysis takes as given about device and recording; everything has a stated default.</summary>
public sealed record AnalysisSettings
{
    /// <summary>Kind of the device; picks default definitions.</summary>
    public DeviceKind Kind { get; init; } = DeviceKind.Mosfet;

    /// <summary>Place of the device; <see cref="DevicePosition.High"/> mirrors the definitions.</summary>
    public DevicePosition Position { get; init; } = DevicePosition.Low;

    /// <summary>Stated channel errors; an absent channel has gain 1, no stated offset, no skew.</summary>
    public IReadOnlyDictionary<Channel, ChannelCorrection> Corrections { get; init; } =
        new Dictionary<Channel, ChannelCorrection>();

    /// <summary>The current shunt, where its inductance is to be undone; null: nothing to undo.</summary>
    public Shunt? Shunt { get; init; }

    /// <summary>Stated forward voltage of the freewheeling diode, V; null: not stated.</summary>
    public double? ForwardVoltage { get; init; }

    /// <summary>Threshold of the high side's gate for a false turn-on, V; null: not stated.</summary>
    public double? HighSideThreshold { get; init; }

    /// <summary>Time of <c>qrr/window-T</c>, s; null: that definition is not formed.</summary>
    public double? IntegrationTime { get; init; }

    /// <summary>Dead time after an edge of the gate in which further crossings do not count, s.</summary>
    public double DeadTime { get; init; } = 250e-9;

    /// <summary>Definitions asked for in place of the defaults: quantity to definition ID.</summary>
    public IReadOnlyDictionary<string, string> Definitions { get; init; } = new Dictionary<string, string>();

    /// <summary>Names of the quantities that are wanted; null: all. Sensitivities analyse one record many
    /// times.</summary>
    public IReadOnlySet<string>? Quantities { get; init; }

    /// <summary>Whether every definition of the catalogue is formed, or each quantity's chosen one alone.</summary>
    public bool EveryDefinition { get; init; }

    /// <summary>The same for a record that is right as it is: no errors of channels or shunt to undo.</summary>
    public AnalysisSettings WithoutCorrections() => this with
    {
        Corrections = new Dictionary<Channel, ChannelCorrection>(),
        Shunt = Shunt is null ? null : Shunt with { Inductance = 0 },
    };
}
