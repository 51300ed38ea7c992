using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using BenchRunner.Signals.Traces;
using static BenchRunner.Acceptance.Schemas.Shapes;

namespace BenchRunner.Acceptance.Benches;

/// <summary>The keys of a file's channels: all in a bench file, the stated errors alone in a settings file.</summary>
internal static class ChannelKeys
{
    private static readonly string[] _voltageProbes = ["ground-referenced", "differential", "isolated"];
    private static readonly string[] _currentProbes = ["shunt", "coil", "transformer", ChannelSetup.Clamp];

    /// <summary>The channels of a bench file.</summary>
    public static BlockShape OfBench { get; } = Channels(isBench: true);

    /// <summary>The channels of a settings file; a block copied from a bench file is taken as it is.</summary>
    public static BlockShape OfSettings { get; } = Channels(isBench: false);

    /// <summary>Checks what must hold for each channel.</summary>
    public static void Check(Fields channels, List<Problem> problems)
    {
        foreach (string name in channels.Keys)
        {
            Fields channel = channels.Block(name);
            if (channel.Number("gain") == 0)
            {
                problems.Add(new Problem(
                    channel.Of("gain"),
                    $"gain of {name} is 0",
                    "how much larger the record is than the truth",
                    "state the gain, e.g. 1"));
            }
        }
    }

    private static BlockShape Channels(bool isBench) => new(
        "The recorded channels; recorded = gain · true + offset, late by delay and skew.",
        [.. ChannelNames.All.Select(channel => Key.Optional(channel.Name(), Of(channel, isBench)))],
        AtLeast: 1);

    private static BlockShape Of(Channel channel, bool isBench)
    {
        string unit = channel.Unit();
        bool isVoltage = unit == "V";
        return new BlockShape(
            isVoltage ? "A voltage." : "A current, positive into the drain.",
            [
                new Key("scope", new WholeShape("The scope's own channel number.", 1, 64, 1), isBench),
                new Key("probe", new WordShape("Kind of probe.", isVoltage ? _voltageProbes : _currentProbes), isBench),
                Key.Optional("rating", Positive("Most that the probe bears.", unit, isVoltage ? "1500 V" : "200 A")),
                Key.Optional("common-mode", Positive(
                    "Highest voltage to earth that its inputs bear.", "V", "1000 V")),
                Key.Optional("bandwidth", Positive("Bandwidth of the probe.", "Hz", "100 MHz")),
                Key.Optional("delay", new QuantityShape(
                    "Delay of the probe by its data sheet; the skew comes on top.", "s", new Bounds(0, 1e-6), "12 ns")),
                Key.Optional("attenuation", Positive(
                    "Attenuation that the scope is told and must say when asked back.", "1", "100")),
                new Key("gain", new QuantityShape("Stated gain; 1: none.", "1", Bounds.Any, "1"), isBench),
                Key.Optional("offset", new QuantityShape(
                    "Stated offset; left out: not known.", unit, Bounds.Any, $"0 {unit}")),
                new Key(
                    "skew",
                    new QuantityShape("Stated delay; positive: late.", "s", new Bounds(-1e-6, 1e-6), "0 s"),
                    isBench),
                new Key("uncertainty", Uncertainty(unit), isBench),
            ],
            Sample: isBench ? null : "{ gain: 1.013, skew: 4.6 ns }");
    }

    private static BlockShape Uncertainty(string unit) => new(
        "Standard uncertainties of the stated errors; none of them is zero.",
        [
            Key.Needed("gain", new QuantityShape(
                "Of the gain, relative.", "1", new Bounds(0, 0.5, LowIsIn: false), "0.5 %")),
            Key.Needed("offset", Positive("Of the offset.", unit, $"100 m{unit}")),
            Key.Needed("skew", Time("Of the skew.", 1e-6, "200 ps")),
        ]);
}
