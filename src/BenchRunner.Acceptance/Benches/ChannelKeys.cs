using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Benches;

/// <summary>The keys of a file's channels: all of them in a bench file, the stated errors alone where waveforms are analysed.</summary>
internal static class ChannelKeys
{
    private static readonly string[] _voltageProbes = ["ground-referenced", "differential", "isolated"];
    private static readonly string[] _currentProbes = ["shunt", "coil", "transformer", "clamp"];

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
                    channel.Of("gain"), $"gain of {name} is 0", "what the record is larger by than the truth, e.g. 1", "state the gain"));
            }
        }
    }

    private static BlockShape Channels(bool isBench) => new(
        "The recorded channels; recorded = gain · true + offset, late by skew.",
        [.. ChannelNames.All.Select(channel => Key.Optional(channel.Name(), Channel(channel, isBench)))],
        AtLeast: 1);

    private static BlockShape Channel(Channel channel, bool isBench)
    {
        string unit = channel.Unit();
        var uncertainty = new BlockShape(
            "Standard uncertainties of the stated errors; none of them is zero.",
            [
                Key.Needed("gain", new QuantityShape("Of the gain, relative.", "1", new Bounds(0, 0.5, LowIsIn: false))),
                Key.Needed("offset", new QuantityShape("Of the offset.", unit, Bounds.Positive)),
                Key.Needed("skew", new QuantityShape("Of the skew.", "s", Bounds.Positive)),
            ]);
        return new BlockShape(
            unit == "V" ? "A voltage." : "A current, positive into the drain.",
            [
                new Key("scope", new WholeShape("The scope's own channel number.", 1, 64), isBench),
                new Key(
                    "probe", new WordShape("Kind of probe.", unit == "V" ? _voltageProbes : _currentProbes), isBench),
                Key.Optional("rating", new QuantityShape("Most that the probe bears.", unit, Bounds.Positive)),
                new Key("gain", new QuantityShape("Stated gain; 1: none.", "1", Bounds.Any), isBench),
                Key.Optional("offset", new QuantityShape("Stated offset; left out: not known.", unit, Bounds.Any)),
                new Key("skew", new QuantityShape("Stated delay; positive: late.", "s", new Bounds(-1e-6, 1e-6)), isBench),
                new Key("uncertainty", uncertainty, isBench),
            ]);
    }
}
