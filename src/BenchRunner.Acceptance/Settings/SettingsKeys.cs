using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using static BenchRunner.Acceptance.Schemas.Key;

namespace BenchRunner.Acceptance.Settings;

/// <summary>The keys of a settings file for the analysis of waveforms: blocks of sequence and bench files.</summary>
internal static class SettingsKeys
{
    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "What the analysis takes as given about device and recording.",
        [
            FormatReader.FormatKey with { IsRequired = false },
            Optional("kind", Shapes.Kind),
            Optional("position", Shapes.Position),
            Optional("channels", ChannelKeys.OfSettings),
            Optional("shunt", Shapes.Shunt),
            Optional("diode", new BlockShape(
                "The freewheeling diode.",
                [Needed("forward-voltage", Shapes.Positive("Forward voltage.", "V", "3 V"))])),
            Optional("high-side", Shapes.HighSide),
            Optional("dead-time", Shapes.Time(
                "Time after an edge of the gate in which further crossings do not count.", 1e-3, "250 ns")),
            Optional("integration-time", Shapes.IntegrationTime),
            Optional("definitions", Shapes.Definitions),
        ],
        Sample: BlockShape.Shipped);
}
