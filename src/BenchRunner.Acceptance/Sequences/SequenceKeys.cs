using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using static BenchRunner.Acceptance.Schemas.Key;
using static BenchRunner.Acceptance.Schemas.Shapes;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>The keys of a sequence file: the one table behind reader, messages and schema.</summary>
internal static class SequenceKeys
{
    /// <summary>Criteria whose bound a sequence may state.</summary>
    private static readonly (string Key, string Unit, double Most, string Sample, string Meaning)[] _bounds =
    [
        ("bus-within", "1", 0.1, "1 %", "Bus voltage against the point's."),
        ("bus-droop", "1", 0.2, "3 %", "Droop of the bus over the first pulse."),
        ("current-within", "1", 0.1, "2 %", "Load current at the first turn-off against the point's."),
        ("ramp-straightness", "1", 0.1, "2 %", "Bend of the first ramp over the current at its end."),
        ("noise-below", "1", 0.1, "1 %", "Noise over full scale."),
        ("temperature-within", "K", 20, "3 K", "Plate temperature against the point's."),
        ("gate-levels", "V", 2, "0.5 V", "Gate levels against the point's."),
    ];

    /// <summary>Criteria that have no bound to state; naming them changes nothing.</summary>
    private static readonly string[] _fixed =
    [
        "complete", "fresh", "not-clipped", "range-used", "two-pulses", "baseline", "high-side-off", "desaturated",
        "settled", "bus-agrees",
    ];

    private static readonly BlockShape _ratings = new(
        "What the device may bear.",
        [
            Needed("blocking-voltage", Positive("Blocking voltage.", "V", "1200 V")),
            Needed("peak-current", Positive("Peak current.", "A", "160 A")),
            Needed("gate", new PairShape("Lowest and highest gate voltage.", "V", new Bounds(-50, 50))),
            Needed("junction-max", new QuantityShape(
                "Highest junction temperature.", "degC", new Bounds(0, 500), "175 degC")),
        ]);

    private static readonly BlockShape _expected = new(
        "What a sound device does; ranges and sampling are planned by it, nothing is decided.",
        [
            Needed("fastest-edge", Time("Shortest edge.", 1e-3, "10 ns")),
            Needed("ring-frequency", Positive("Ring frequency.", "Hz", "42 MHz")),
            Needed("on-voltage", Positive("On-state voltage at the rated current.", "V", "1.1 V")),
            Needed("forward-voltage", Positive("Forward voltage of the freewheeling diode.", "V", "3 V")),
        ]);

    private static readonly BlockShape _gate = new(
        "Gate levels, and the gate resistors that the point is meant for.",
        [
            Needed("on", new QuantityShape("On level of the gate.", "V", new Bounds(-50, 50), "18 V")),
            Needed("off", new QuantityShape("Off level of the gate.", "V", new Bounds(-50, 50), "-4 V")),
            Optional("resistance-on", NotNegative("Turn-on gate resistance.", "Ohm", "4.7 Ohm")),
            Optional("resistance-off", NotNegative("Turn-off gate resistance.", "Ohm", "2.2 Ohm")),
        ]);

    private static readonly BlockShape _pulses = new(
        "The pulse train; the plan works out the first pulse.",
        [
            Needed("gap", Time("Time between the pulses.", 10e-3, "6 us")),
            Needed("second", Time("Width of the second pulse.", 10e-3, "3 us")),
            Needed("repeat-every", Time("Least time between two trains.", 3600, "250 ms")),
        ]);

    private static readonly BlockShape _point = new(
        "An operating point.",
        [
            Needed("name", Name("Name, unique in the sequence.", "rated")),
            Needed("bus-voltage", Positive("Bus voltage.", "V", "600 V")),
            Needed("load-current", Positive("Load current at the first turn-off.", "A", "40 A")),
            Optional("temperature", new QuantityShape(
                "Plate temperature, or ambient (the default).",
                "degC",
                new Bounds(-60, 250),
                "125 degC",
                Sequence.Ambient)),
            Needed("gate", _gate),
            Needed("pulses", _pulses),
            Optional("else-skip-higher", new FlagShape("Whether higher points are left out when a limit fails here.")),
        ]);

    private static readonly BlockShape _limit = new(
        "A limit: at-most, at-least or between.",
        [
            Needed("quantity", QuantityName),
            Optional("definition", new ChosenShape(
                "ID of the definition that the limit is meant for; without it the default one.",
                "quantity",
                ByQuantity(quantity => new DefinitionShape(quantity)))),
            Needed("at", Name("Name of the operating point.", "rated")),
            Optional("at-most", Bound("Upper bound.")),
            Optional("at-least", Bound("Lower bound.")),
            Optional("between", new ChosenShape(
                "Lower and upper bound.",
                "quantity",
                ByQuantity(quantity => new PairShape("", quantity.Unit, Bounds.Any)))),
            Optional("else-skip-higher", new FlagShape("Whether higher points are left out when this limit fails.")),
        ],
        Sample: "{ quantity: eon, at: rated, at-most: 705 uJ }");

    private static readonly BlockShape _captures = new(
        "How many captures a point.",
        [
            Needed("valid", new WholeShape("Valid captures wanted; a spread needs two.", 2, 1000, 5)),
            Needed("at-most", new WholeShape("Most captures taken.", 2, 10_000, 20)),
        ]);

    private static readonly BlockShape _validity = new(
        "Bounds of the validity criteria in place of their defaults.",
        [
            .. _bounds.Select(bound => Optional(
                bound.Key,
                new QuantityShape(bound.Meaning, bound.Unit, new Bounds(0, bound.Most, LowIsIn: false), bound.Sample))),
            .. _fixed.Select(name => Optional(
                name, new WordShape("A criterion that always applies, with a fixed bound.", ["default"]))),
        ],
        Sample: "{ current-within: 2 %, bus-droop: 3 % }");

    private static readonly BlockShape _decision = new(
        "How a value and its uncertainty become a conformity.",
        [
            Needed("rule", new WordShape(
                "guarded: the expanded uncertainty is a guard band.", ["guarded", "simple"])),
            Optional("coverage", new QuantityShape(
                "Coverage probability of the expanded uncertainty.", "1", new Bounds(0.5, 0.9999), "95 %")),
            Optional("guard-factor", new QuantityShape(
                "Guard band in multiples of the expanded uncertainty.", "1", new Bounds(0, 3, LowIsIn: false), "0.83")),
        ]);

    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "What one device goes through and what it must meet.",
        [
            FormatReader.FormatKey,
            Needed("sequence", new TextShape("Name of the sequence.", "wd-1200s-25 incoming")),
            Needed("revision", new WholeShape("Revision; a changed file is a new one.", 1, 1_000_000, 1)),
            Needed("part", new TextShape("The part.", "WD-1200S-25")),
            Needed("kind", Kind),
            Needed("position", Position),
            Optional("serial", new BlockShape(
                "What serials look like.",
                [
                    Needed("form", new ExpressionShape(
                        "Regular expression that a whole serial must match.", "W1200-[0-9]{4}")),
                ])),
            Optional("companion", new BlockShape(
                "The companion in the other place.", [Needed("part", new TextShape("Its part.", "WD-1200S-25"))])),
            Needed("ratings", _ratings),
            Optional("thermal-impedance", new ThermalShape(
                "Transient thermal impedance, junction to plate, by pulse time.")),
            Needed("expected", _expected),
            Optional("leakage", Positive("Highest leakage at the bus voltage.", "A", "2 mA")),
            Needed("operating-points", new ListShape("The operating points.", _point, "operating point", 1)),
            Optional("order", new WordShape(
                "grouped (the default): by temperature, bus voltage, current, upwards.", ["grouped", "as-written"])),
            Optional("soak", NotNegative(
                "Time for which a new temperature holds, within tolerance and drifting below 0.5 K a minute, before the "
                    + "first capture.", "s", "120 s")),
            Optional("captures", _captures),
            Optional("until", new WordShape(
                "valid (the default): captures go on until the wanted number is valid; decided: until every limit is.",
                ["valid", "decided"])),
            Optional("validity", _validity),
            Optional("integration-time", IntegrationTime),
            Optional("definitions", Definitions),
            Needed("limits", new ListShape("The limits.", _limit, "limit", 1)),
            Optional("decision", _decision),
            Optional("attempts", new WholeShape("Most attempts of a device in a lot.", 1, 100, 2)),
        ],
        Sample: BlockShape.Shipped);

    private static ChosenShape Bound(string meaning) => new(
        meaning,
        "quantity",
        ByQuantity(quantity => new QuantityShape("", quantity.Unit, Bounds.Any, UnitText.ExampleOf(quantity.Unit))));
}
