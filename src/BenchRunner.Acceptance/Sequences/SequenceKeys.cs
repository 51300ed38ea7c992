using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>The keys of a sequence file: the one table behind reader, messages and schema.</summary>
internal static class SequenceKeys
{
    /// <summary>Criteria whose bound a sequence may state: key, unit, largest bound.</summary>
    private static readonly (string Key, string Unit, double Most, string Meaning)[] _bounds =
    [
        ("bus-within", "1", 0.1, "Bus voltage against the point's."),
        ("bus-droop", "1", 0.2, "Droop of the bus over the first pulse."),
        ("current-within", "1", 0.1, "Load current at the first turn-off against the point's."),
        ("ramp-straightness", "1", 0.1, "Bend of the first ramp over the current at its end."),
        ("noise-below", "1", 0.1, "Noise over full scale."),
        ("temperature-within", "K", 20, "Plate temperature against the point's."),
        ("gate-levels", "V", 2, "Gate levels against the point's."),
    ];

    /// <summary>Criteria that have no bound to state; naming them changes nothing.</summary>
    private static readonly string[] _fixed =
    [
        "complete", "fresh", "not-clipped", "range-used", "two-pulses", "baseline", "high-side-off", "desaturated", "settled",
        "bus-agrees",
    ];

    private static readonly BlockShape _point = new(
        "An operating point.",
        [
            Key.Needed("name", new TextShape(
                "Name, unique in the sequence.", "rated", Shapes.NamePattern, "a name of 1 to 64 letters, digits, '.', '_' or '-'")),
            Key.Needed("bus-voltage", new QuantityShape("Bus voltage.", "V", Bounds.Positive)),
            Key.Needed("load-current", new QuantityShape("Load current at the first turn-off.", "A", Bounds.Positive)),
            Key.Optional("temperature", new QuantityShape(
                "Plate temperature, or ambient (the default).", "degC", new Bounds(-60, 250), Sequence.Ambient)),
            Key.Needed("gate", new BlockShape(
                "Gate levels, and the gate resistors that the point is meant for.",
                [
                    Key.Needed("on", new QuantityShape("On level of the gate.", "V", new Bounds(-50, 50))),
                    Key.Needed("off", new QuantityShape("Off level of the gate.", "V", new Bounds(-50, 50))),
                    Key.Optional("resistance-on", new QuantityShape("Turn-on gate resistance.", "Ohm", Bounds.NotNegative)),
                    Key.Optional("resistance-off", new QuantityShape("Turn-off gate resistance.", "Ohm", Bounds.NotNegative)),
                ])),
            Key.Needed("pulses", new BlockShape(
                "The pulse train; the plan works out the first pulse.",
                [
                    Key.Needed("gap", Time("Time between the pulses.", 10e-3)),
                    Key.Needed("second", Time("Width of the second pulse.", 10e-3)),
                    Key.Needed("repeat-every", Time("Least time between two trains.", 3600)),
                ])),
            Key.Optional("else-skip-higher", new FlagShape("Whether higher points are left out when a limit fails here.")),
        ]);

    private static readonly BlockShape _limit = new(
        "A limit: at-most, at-least or between.",
        [
            Key.Needed("quantity", Shapes.Quantity),
            Key.Optional("definition", new ChosenShape(
                "ID of the definition that the limit is meant for; without it the default one.",
                "quantity",
                KnownQuantities.Names.ToDictionary(name => name, Shapes.DefinitionOf))),
            Key.Needed("at", new TextShape("Name of the operating point.", "rated")),
            Key.Optional("at-most", Bound("Upper bound.")),
            Key.Optional("at-least", Bound("Lower bound.")),
            Key.Optional("between", new ChosenShape(
                "Lower and upper bound.", "quantity", Shapes.ByQuantity(unit => new PairShape("", unit, Bounds.Any)))),
            Key.Optional("else-skip-higher", new FlagShape("Whether higher points are left out when this limit fails.")),
        ]);

    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "What one device goes through and what it must meet.",
        [
            FormatReader.FormatKey,
            Key.Needed("sequence", new TextShape("Name of the sequence.", "wd-1200s-25 incoming")),
            Key.Needed("revision", new WholeShape("Revision; a changed file is a new one.", 1, 1_000_000)),
            Key.Needed("part", new TextShape("The part.", "WD-1200S-25")),
            Key.Needed("kind", Shapes.Kind),
            Key.Needed("position", Shapes.Position),
            Key.Optional("serial", new BlockShape(
                "What serials look like.",
                [Key.Needed("form", new ExpressionShape("Regular expression that a whole serial must match.", "W1200-[0-9]{4}"))])),
            Key.Optional("companion", new BlockShape(
                "The companion in the other place.", [Key.Needed("part", new TextShape("Its part.", "WD-1200S-25"))])),
            Key.Needed("ratings", new BlockShape(
                "What the device may bear.",
                [
                    Key.Needed("blocking-voltage", new QuantityShape("Blocking voltage.", "V", Bounds.Positive)),
                    Key.Needed("peak-current", new QuantityShape("Peak current.", "A", Bounds.Positive)),
                    Key.Needed("gate", new PairShape("Lowest and highest gate voltage.", "V", new Bounds(-50, 50))),
                    Key.Needed("junction-max", new QuantityShape("Highest junction temperature.", "degC", new Bounds(0, 500))),
                ])),
            Key.Optional("thermal-impedance", new ThermalShape("Transient thermal impedance, junction to plate, by pulse time.")),
            Key.Needed("expected", new BlockShape(
                "What a sound device does; ranges and sampling are planned by it, nothing is decided.",
                [
                    Key.Needed("fastest-edge", Time("Shortest edge.", 1e-3)),
                    Key.Needed("ring-frequency", new QuantityShape("Ring frequency.", "Hz", Bounds.Positive)),
                    Key.Needed("on-voltage", new QuantityShape("On-state voltage at the rated current.", "V", Bounds.Positive)),
                    Key.Needed("forward-voltage", new QuantityShape(
                        "Forward voltage of the freewheeling diode.", "V", Bounds.Positive)),
                ])),
            Key.Optional("leakage", new QuantityShape("Highest leakage at the bus voltage.", "A", Bounds.Positive)),
            Key.Needed("operating-points", new ListShape("The operating points.", _point, "operating point", 1)),
            Key.Optional("order", new WordShape(
                "grouped (the default): by temperature, bus voltage, current, upwards.", ["grouped", "as-written"])),
            Key.Optional("soak", new QuantityShape("Time at a new temperature before the first capture.", "s", Bounds.NotNegative)),
            Key.Optional("captures", new BlockShape(
                "How many captures a point.",
                [
                    Key.Needed("valid", new WholeShape("Valid captures wanted; a spread needs two.", 2, 1000)),
                    Key.Needed("at-most", new WholeShape("Most captures taken.", 2, 10_000)),
                ])),
            Key.Optional("until", new WordShape(
                "valid (the default): until the wanted number is valid; decided: until every limit is, or at-most is reached.",
                ["valid", "decided"])),
            Key.Optional("validity", new BlockShape(
                "Bounds of the validity criteria in place of their defaults.",
                [
                    .. _bounds.Select(bound => Key.Optional(
                        bound.Key, new QuantityShape(bound.Meaning, bound.Unit, new Bounds(0, bound.Most, LowIsIn: false)))),
                    .. _fixed.Select(name => Key.Optional(
                        name, new WordShape("A criterion that always applies, with a fixed bound.", ["default"]))),
                ])),
            Key.Optional("integration-time", Shapes.IntegrationTime),
            Key.Optional("definitions", Shapes.Definitions),
            Key.Needed("limits", new ListShape("The limits.", _limit, "limit", 1)),
            Key.Optional("decision", new BlockShape(
                "How a value and its uncertainty become a conformity.",
                [
                    Key.Needed("rule", new WordShape("guarded: the expanded uncertainty is a guard band.", ["guarded", "simple"])),
                    Key.Optional("coverage", new QuantityShape(
                        "Coverage probability of the expanded uncertainty.", "1", new Bounds(0.5, 0.9999))),
                    Key.Optional("guard-factor", new QuantityShape(
                        "Guard band in multiples of the expanded uncertainty.", "1", new Bounds(0, 3, LowIsIn: false))),
                ])),
            Key.Optional("attempts", new WholeShape("Most attempts of a device in a lot.", 1, 100)),
        ]);

    private static QuantityShape Time(string meaning, double most) =>
        new(meaning, "s", new Bounds(0, most, LowIsIn: false));

    private static ChosenShape Bound(string meaning) =>
        new(meaning, "quantity", Shapes.ByQuantity(unit => new QuantityShape("", unit, Bounds.Any)));
}
