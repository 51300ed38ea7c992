using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Settings;

/// <summary>The keys of a settings file for the analysis of waveforms: blocks of sequence and bench files.</summary>
internal static class SettingsKeys
{
    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "What the analysis takes as given about device and recording.",
        [
            FormatReader.FormatKey with { IsRequired = false },
            Key.Optional("kind", Shapes.Kind),
            Key.Optional("position", Shapes.Position),
            Key.Optional("channels", ChannelKeys.OfSettings),
            Key.Optional("shunt", Shapes.Shunt),
            Key.Optional("diode", new BlockShape(
                "The freewheeling diode.",
                [Key.Needed("forward-voltage", new QuantityShape("Forward voltage.", "V", Bounds.Positive))])),
            Key.Optional("high-side", Shapes.HighSide),
            Key.Optional("dead-time", new QuantityShape(
                "Time after an edge of the gate in which further crossings do not count.", "s", new Bounds(0, 1e-3, LowIsIn: false))),
            Key.Optional("integration-time", Shapes.IntegrationTime),
            Key.Optional("definitions", Shapes.Definitions),
        ]);
}
