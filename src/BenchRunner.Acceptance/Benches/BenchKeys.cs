using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Benches;

/// <summary>The keys of a bench file: the one table behind reader, messages and schema.</summary>
internal static class BenchKeys
{
    private static readonly BlockShape _fake = new(
        "The fake bench that run starts; left out: instruments that are there.",
        [
            Key.Needed("seed", new WholeShape("Seed of spread, noise and jitter.", 0, int.MaxValue)),
            Key.Optional("pace", new QuantityShape(
                "How much faster charging and bleeding components are than a lab's.", "1", new Bounds(1, 5))),
            Key.Optional("faults", new ListShape(
                "Faults to inject.",
                new TextShape(
                    "A fault, and when.",
                    "interlock-opens@fire:3",
                    "[a-z0-9-]+(@(fire|volts|seconds|block):[0-9]+([.][0-9]+)?)?",
                    "a fault's name, or name@when with fire:N, volts:V, seconds:S or block:N"),
                "fault")),
        ]);

    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "Instruments and fixture of one bench.",
        [
            FormatReader.FormatKey,
            Key.Needed("bench", new TextShape(
                "Name of the bench.", "fake", Shapes.NamePattern, "a name of 1 to 64 letters, digits, '.', '_' or '-'")),
            Key.Optional("fake", _fake),
            Key.Needed("roles", new BlockShape(
                "The instruments by their role.",
                [
                    Key.Needed("supply", Role("Charges the bus.")),
                    Key.Needed("pulser", Role("Fires the pulse trains.")),
                    Key.Needed("scope", Role("Records the channels.")),
                    Key.Needed("voltmeter", Role("Measures the bank, independent of the supply.", hasPlace: true)),
                    Key.Needed("interlock", Role("Loop, emergency stop, bleeder relay.")),
                ])),
            Key.Needed("exchange", new WordShape(
                "How devices are exchanged; none: one device, already in.", ["none", "by-hand"])),
            Key.Needed("load", new BlockShape(
                "The load inductor.",
                [
                    Key.Needed("inductance", new QuantityShape("Inductance.", "H", Bounds.Positive)),
                    Key.Needed("resistance", new QuantityShape("Resistance.", "Ohm", Bounds.NotNegative)),
                    Key.Optional("to", new WordShape(
                        "The rail it goes to; positive (the default): the low switch fires.", ["positive", "negative"])),
                ])),
            Key.Needed("bus", new BlockShape(
                "The capacitor bank.",
                [
                    Key.Needed("capacitance", new QuantityShape("Capacitance.", "F", Bounds.Positive)),
                    Key.Needed("bleeder", new QuantityShape(
                        "What the interlock's relay connects across the bank.", "Ohm", Bounds.Positive)),
                    Key.Optional("empty-socket", new QuantityShape(
                        "Current that the bench draws with an empty socket.", "A", Bounds.NotNegative)),
                ])),
            Key.Needed("supply", new BlockShape(
                "How the supply is used.",
                [
                    Key.Needed("charging-current", new QuantityShape("Its current limit while charging.", "A", Bounds.Positive)),
                ])),
            Key.Optional("scope", new BlockShape(
                "What the scope can do.",
                [
                    Key.Optional("bits", new WholeShape("Bits of its converter.", 6, 16)),
                    Key.Optional("fastest-interval", new QuantityShape(
                        "Its shortest sample interval.", "s", new Bounds(0, 1e-3, LowIsIn: false))),
                    Key.Optional("samples-at-most", new WholeShape("Its largest record, samples a channel.", 1000, 64_000_000)),
                ])),
            Key.Needed("loop", new BlockShape(
                "The commutation loop.", [Key.Needed("inductance", new QuantityShape("Inductance.", "H", Bounds.Positive))])),
            Key.Needed("gate-resistors", new BlockShape(
                "The gate resistors fitted.",
                [
                    Key.Needed("on", new QuantityShape("For turn-on.", "Ohm", Bounds.NotNegative)),
                    Key.Needed("off", new QuantityShape("For turn-off.", "Ohm", Bounds.NotNegative)),
                ])),
            Key.Optional("high-side", Shapes.HighSide),
            Key.Optional("shunt", Shapes.Shunt),
            Key.Needed("channels", ChannelKeys.OfBench),
            Key.Needed("envelope", new BlockShape(
                "The hard ceiling of the bench; nothing goes above it.",
                [
                    Key.Needed("voltage", new QuantityShape("Highest bus voltage.", "V", Bounds.Positive)),
                    Key.Needed("current", new QuantityShape("Highest load current.", "A", Bounds.Positive)),
                    Key.Needed("energy", new QuantityShape("Highest energy in the bank.", "J", Bounds.Positive)),
                    Key.Needed("pulse", new QuantityShape("Longest single pulse.", "s", Bounds.Positive)),
                ])),
            Key.Needed("ambient", new QuantityShape("Temperature of the room.", "degC", new Bounds(-40, 60))),
            Key.Optional("cautions", new ListShape(
                "The lab's own lines, shown with the cautions.",
                new TextShape("A line.", "Hang the warning sign on the door."),
                "line")),
        ]);

    private static BlockShape Role(string meaning, bool hasPlace = false)
    {
        Key[] keys =
        [
            Key.Needed("link", new TextShape(
                "How it is reached.",
                "tcp 192.168.1.20:5025",
                InstrumentSetup.LinkPattern,
                "a link: tcp HOST:PORT or serial DEVICE")),
            Key.Needed("dialect", new TextShape(
                "Name of its dialect file, without ending.",
                "generic-supply",
                Dialects.DialectReader.NamePattern,
                "a name of lower-case letters, digits and '-'")),
            Key.Optional("connections", new WholeShape("Clients that it serves at once; 1 where not stated.", 1, 16)),
        ];
        Key place = Key.Needed("at", new WordShape(
            "Where it measures; a run wants it at the bank.", ["bank", "supply", "device"]));
        return new BlockShape(meaning, hasPlace ? [.. keys, place] : keys);
    }
}
