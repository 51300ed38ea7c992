using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>Shapes that several kinds of file share.</summary>
internal static class Shapes
{
    /// <summary>What names that end up in paths, logs and tables are made of.</summary>
    public const string NamePattern = "[A-Za-z0-9._-]{1,64}";

    /// <summary>The kinds of device by their words.</summary>
    public static IReadOnlyDictionary<string, DeviceKind> Kinds { get; } = new Dictionary<string, DeviceKind>
    {
        ["mosfet"] = DeviceKind.Mosfet,
        ["igbt"] = DeviceKind.Igbt,
        ["diode"] = DeviceKind.Diode,
    };

    /// <summary>The positions by their words.</summary>
    public static IReadOnlyDictionary<string, DevicePosition> Positions { get; } =
        new Dictionary<string, DevicePosition>
        {
            ["low"] = DevicePosition.Low,
            ["high"] = DevicePosition.High,
            ["both"] = DevicePosition.Both,
        };

    /// <summary>Kind of the device.</summary>
    public static WordShape Kind { get; } = new("Kind of the device; picks the default definitions.", [.. Kinds.Keys]);

    /// <summary>Position of the device.</summary>
    public static WordShape Position { get; } = new(
        "Place of the device in the half bridge: low or high fires, both is one module in both places.",
        [.. Positions.Keys]);

    /// <summary>Definitions in place of the defaults.</summary>
    public static BlockShape Definitions { get; } = new(
        "Definition IDs in place of the defaults, by quantity.",
        [.. QuantityCatalogue.All.Select(quantity => Key.Optional(quantity.Name, new DefinitionShape(quantity)))],
        Sample: "{ qrr: qrr/fall-10 }");

    /// <summary>Integration time of a recovered charge.</summary>
    public static QuantityShape IntegrationTime { get; } = Time(
        "Time from the zero crossing over which qrr/window is integrated.", 1e-3, "100 ns");

    /// <summary>The current shunt.</summary>
    public static BlockShape Shunt { get; } = new(
        "The current shunt; its inductance is undone before anything is measured.",
        [
            Key.Needed("resistance", Positive("Resistance.", "Ohm", "5 mOhm")),
            Key.Needed("inductance", NotNegative("Series inductance; 0 H: nothing to undo.", "H", "200 pH")),
        ]);

    /// <summary>The high side.</summary>
    public static BlockShape HighSide { get; } = new(
        "The high side.",
        [
            Key.Needed("gate-threshold", new QuantityShape(
                "Gate voltage above which a false turn-on is found.", "V", new Bounds(-50, 50), "0.5 V")),
        ]);

    /// <summary>A quantity of the catalogue.</summary>
    public static WordShape QuantityName { get; } = new(
        "The quantity.",
        [.. QuantityCatalogue.All.Select(quantity => quantity.Name)],
        "a quantity as 'benchrunner quantities' lists them");

    /// <summary>A shape for each quantity of the catalogue.</summary>
    public static Dictionary<string, Shape> ByQuantity(Func<Quantity, Shape> shape) =>
        QuantityCatalogue.All.ToDictionary(quantity => quantity.Name, shape);

    /// <summary>A name that may end up in a path.</summary>
    public static TextShape Name(string meaning, string sample) =>
        new(meaning, sample, NamePattern, "a name of 1 to 64 letters, digits, '.', '_' or '-'");

    /// <summary>A value above zero.</summary>
    public static QuantityShape Positive(string meaning, string unit, string sample) =>
        new(meaning, unit, Bounds.Positive, sample);

    /// <summary>A value of zero or more.</summary>
    public static QuantityShape NotNegative(string meaning, string unit, string sample) =>
        new(meaning, unit, Bounds.NotNegative, sample);

    /// <summary>A time above zero.</summary>
    public static QuantityShape Time(string meaning, double most, string sample) =>
        new(meaning, "s", new Bounds(0, most, LowIsIn: false), sample);

    /// <summary>The shunt of a file that has no problem; null where there is none.</summary>
    public static Shunt? ShuntOf(Fields file) => file.IsWritten("shunt")
        ? new Shunt(file.Block("shunt").Need("resistance"), file.Block("shunt").Need("inductance"))
        : null;

    /// <summary>The definitions of a file that has no problem.</summary>
    public static Dictionary<string, string> DefinitionsIn(Fields file)
    {
        Fields block = file.Block("definitions");
        return block.Keys.ToDictionary(key => key, key => block.Text(key)!);
    }
}
