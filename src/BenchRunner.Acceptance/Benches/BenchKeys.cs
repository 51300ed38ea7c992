using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using static BenchRunner.Acceptance.Schemas.Key;
using static BenchRunner.Acceptance.Schemas.Shapes;

namespace BenchRunner.Acceptance.Benches;

/// <summary>The keys of a bench file: the one table behind reader, messages and schema.</summary>
internal static class BenchKeys
{
    // The port's size is a rule besides.
    private const string LinkPattern =
        @"tcp ([A-Za-z0-9.-]{1,150}|\[[0-9A-Fa-f:.]{2,45}\])[: ][0-9]{1,5}|"
        + @"hislip ([A-Za-z0-9.-]{1,150}|\[[0-9A-Fa-f:.]{2,45}\])(:[0-9]{1,5})?(/[!-~]{1,256})?|"
        + "serial [^ ]{1,150}( [1-9][0-9]{1,6})?";

    private static readonly BlockShape _fake = new(
        "The fake bench that run starts; left out: instruments that are there.",
        [
            Needed("seed", new WholeShape("Seed of spread, noise and jitter.", 0, int.MaxValue, 1)),
            Optional("pace", new QuantityShape(
                "How much faster charging and bleeding components are than a lab's.", "1", new Bounds(1, 5), "5")),
            Optional("faults", new ListShape(
                "Faults to inject.",
                new TextShape(
                    "A fault, and when.",
                    "interlock-opens@fire:3",
                    "([a-z]+/)?[a-z0-9-]+(@(fire|volts|seconds|block):[0-9]+([.][0-9]+)?)?",
                    "a fault's name (role/name of one instrument's link), or name@when with fire:N, volts:V, "
                        + "seconds:S or block:N"),
                "fault")),
        ]);

    private static readonly BlockShape _roles = new(
        "The instruments by their role.",
        [
            Needed("supply", Role("Charges the bus.", "generic-supply")),
            Needed("pulser", Role("Fires the pulse trains.", "generic-pulser")),
            Needed("scope", Role("Records the channels.", "generic-scope")),
            Needed("voltmeter", Role("Measures the bank by itself.", "generic-voltmeter", hasPlace: true)),
            Needed("interlock", Role("Loop, emergency stop, bleeder relay.", "generic-interlock")),
            Optional("hotplate", Role("Heats the plate under the device and measures it.", "generic-hotplate")),
        ]);

    private static readonly BlockShape _load = new(
        "The load inductor.",
        [
            Needed("inductance", Positive("Inductance.", "H", "120 uH")),
            Needed("resistance", NotNegative("Resistance.", "Ohm", "50 mOhm")),
            Optional("to", new WordShape(
                "The rail it goes to; positive (the default): the low switch fires.", ["positive", "negative"])),
        ]);

    private static readonly BlockShape _bus = new(
        "The capacitor bank.",
        [
            Needed("capacitance", Positive("Capacitance.", "F", "50 uF")),
            Needed("bleeder", Positive("What the interlock's relay connects across the bank.", "Ohm", "25 kOhm")),
            Optional("empty-socket", NotNegative("Current that the bench draws with an empty socket.", "A", "0.1 mA")),
        ]);

    private static readonly BlockShape _scope = new(
        "What the scope can do.",
        [
            Optional("bits", new WholeShape("Bits of its converter.", 6, 16, 12)),
            Optional("fastest-interval", Time("Its shortest sample interval.", 1e-3, "1 ns")),
            Optional("samples-at-most", new WholeShape(
                "Its largest record, samples a channel.", 1000, 64_000_000, 1_000_000)),
        ]);

    private static readonly BlockShape _envelope = new(
        "The hard ceiling of the bench; nothing goes above it.",
        [
            Needed("voltage", Positive("Highest bus voltage.", "V", "900 V")),
            Needed("current", Positive("Highest load current.", "A", "120 A")),
            Needed("energy", Positive("Highest energy in the bank.", "J", "10 J")),
            Needed("pulse", Positive("Longest single pulse.", "s", "20 us")),
            Optional("temperature", new QuantityShape(
                "Highest temperature of the plate; needed with a hotplate.", "degC", new Bounds(0, 300), "150 degC")),
        ]);

    private static readonly BlockShape _safety = new(
        "When the bank counts as down, and how soon silence counts as a fault.",
        [
            Optional("bus-down", new QuantityShape(
                "The bus counts as down below this voltage; 60 V where not stated.",
                "V", new Bounds(1, SafetySettings.UsualBusDown), "60 V")),
            Optional("energy-down", new QuantityShape(
                "The bank counts as down below this energy; 350 mJ where not stated.",
                "J", new Bounds(1e-6, SafetySettings.UsualEnergyDown), "350 mJ")),
            Optional("discharge-within", new QuantityShape(
                "Time in which the bleeder must bring the bank down; 5 s where not stated.",
                "s", new Bounds(0.1, 60), "5 s")),
            Optional("reply-within", new QuantityShape(
                "How long the watch waits for interlock and voltmeter; 350 ms where not stated.",
                "s", new Bounds(0.05, 2), "350 ms")),
            Optional("guardian-silence", new QuantityShape(
                "How long the guardian bears silence of the run; 500 ms where not stated.",
                "s", new Bounds(0.2, 2), "500 ms")),
        ]);

    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "Instruments and fixture of one bench.",
        [
            FormatReader.FormatKey,
            Needed("bench", Name("Name of the bench.", "cabinet-3")),
            Optional("fake", _fake),
            Needed("roles", _roles),
            Needed("exchange", new WordShape(
                "How devices are exchanged; none: one device, already in.", ["none", "by-hand"])),
            Needed("load", _load),
            Needed("bus", _bus),
            Needed("supply", new BlockShape(
                "How the supply is used.",
                [
                    Needed("charging-current", Positive("Its current limit while charging.", "A", "0.5 A")),
                    Optional("current-accuracy", Positive("Accuracy of its current read-back.", "A", "1 mA")),
                ])),
            Optional("scope", _scope),
            Needed("loop", new BlockShape(
                "The commutation loop.", [Needed("inductance", Positive("Inductance.", "H", "34 nH"))])),
            Needed("gate-resistors", new BlockShape(
                "The gate resistors fitted.",
                [
                    Needed("on", NotNegative("For turn-on.", "Ohm", "4.7 Ohm")),
                    Needed("off", NotNegative("For turn-off.", "Ohm", "2.2 Ohm")),
                ])),
            Optional("high-side", HighSide),
            Optional("shunt", Shapes.Shunt),
            Needed("channels", ChannelKeys.OfBench),
            Needed("envelope", _envelope),
            Optional("safety", _safety),
            Needed("ambient", new QuantityShape("Temperature of the room.", "degC", new Bounds(-40, 60), "23 degC")),
            Optional("cautions", new ListShape(
                "The lab's own lines, shown with the cautions.",
                new TextShape("A line.", "Hang the warning sign on the door."),
                "line")),
        ],
        Sample: BlockShape.Shipped);

    private static BlockShape Role(string meaning, string dialect, bool hasPlace = false)
    {
        Key[] keys =
        [
            Needed("link", new TextShape(
                "How it is reached.",
                "tcp 192.168.1.20:5025",
                LinkPattern,
                "a link, tcp HOST:PORT, hislip HOST[:PORT][/SUBADDRESS] or serial DEVICE [BAUD]")),
            Needed("dialect", new TextShape(
                "Name of its dialect file, without ending.",
                dialect,
                DialectReader.NamePattern,
                DialectReader.NameWanted)),
            Optional("connections", new WholeShape("Clients that it serves at once; 1 where not stated.", 1, 16, 2)),
            Optional("identity", new ExpressionShape(
                "Regular expression that the whole answer to *IDN? must match: this very "
                    + "instrument.", "[^,]+,PS-[0-9]+,4711,.*")),
        ];
        Key place = Needed("at", new WordShape(
            "Where it measures; a run wants it at the bank.", ["bank", "supply", "device"]));
        return new BlockShape(meaning, hasPlace ? [.. keys, place] : keys);
    }
}
