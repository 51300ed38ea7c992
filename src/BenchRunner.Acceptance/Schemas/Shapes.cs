using BenchRunner.Signals.Analysis;

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
    public static IReadOnlyDictionary<string, DevicePosition> Positions { get; } = new Dictionary<string, DevicePosition>
    {
        ["low"] = DevicePosition.Low,
        ["high"] = DevicePosition.High,
        ["both"] = DevicePosition.Both,
    };

    /// <summary>Kind of the device.</summary>
    public static WordShape Kind { get; } = new("Kind of the device; picks the default definitions.", [.. Kinds.Keys]);

    /// <summary>Position of the device.</summary>
    public static WordShape Position { get; } = new(
        "Place of the device in the half bridge: low or high fires, both is one module in both places.", [.. Positions.Keys]);

    /// <summary>Definitions in place of the defaults.</summary>
    public static BlockShape Definitions { get; } = new(
        "Definition IDs in place of the defaults, by quantity.",
        [.. KnownQuantities.Names.Select(name => Key.Optional(name, DefinitionOf(name)))]);

    /// <summary>Integration time of a recovered charge.</summary>
    public static QuantityShape IntegrationTime { get; } =
        new("Time from the zero crossing over which qrr/window is integrated.", "s", new Bounds(0, 1e-3, LowIsIn: false));

    /// <summary>The current shunt.</summary>
    public static BlockShape Shunt { get; } = new(
        "The current shunt; its inductance is undone before anything is measured.",
        [
            Key.Needed("resistance", new QuantityShape("Resistance.", "Ohm", Bounds.Positive)),
            Key.Needed("inductance", new QuantityShape("Series inductance; 0 H: nothing to undo.", "H", Bounds.NotNegative)),
        ]);

    /// <summary>The high side.</summary>
    public static BlockShape HighSide { get; } = new(
        "The high side.",
        [
            Key.Needed("gate-threshold", new QuantityShape("Gate voltage above which a false turn-on is found.", "V", Bounds.Any)),
        ]);

    /// <summary>A quantity of the catalogue.</summary>
    public static WordShape Quantity { get; } = new("The quantity.", KnownQuantities.Names);

    /// <summary>The definition IDs of a quantity.</summary>
    public static Shape DefinitionOf(string quantity) =>
        new WordShape($"Definition of {quantity}.", KnownQuantities.DefinitionsOf(quantity));

    /// <summary>A shape for each quantity, by its unit.</summary>
    public static Dictionary<string, Shape> ByQuantity(Func<string, Shape> shape) =>
        KnownQuantities.Names.ToDictionary(name => name, name => shape(KnownQuantities.UnitOf(name)));

    /// <summary>The shunt of a block that has no problem; null where there is none.</summary>
    public static Shunt? ShuntOf(Fields file) => file.IsWritten("shunt")
        ? new Shunt(file.Block("shunt").Need("resistance"), file.Block("shunt").Need("inductance"))
        : null;

    /// <summary>The definitions of a block that has no problem.</summary>
    public static Dictionary<string, string> DefinitionsIn(Fields file)
    {
        Fields block = file.Block("definitions");
        return block.Keys.ToDictionary(key => key, key => block.Text(key)!);
    }
}
