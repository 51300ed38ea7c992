using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using static BenchRunner.Acceptance.Schemas.Key;

namespace BenchRunner.Acceptance.Tolerances;

/// <summary>The keys of a tolerance file.</summary>
internal static class TolerancesKeys
{
    private static readonly BlockShape _limit = new(
        "A tolerance on one quantity.",
        [
            Needed("quantity", Shapes.QuantityName),
            Optional("definition", new ChosenShape(
                "ID of the definition that forms both values; without it the default one.",
                "quantity",
                Shapes.ByQuantity(quantity => new DefinitionShape(quantity)))),
            Needed("within", new QuantityShape(
                "Largest error, either way, as a part of the reference's value.",
                "1",
                new Bounds(0, 10, LowIsIn: false),
                "2 %")),
        ],
        Sample: "{ quantity: trr, within: 0.9 % }");

    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "How well a measured waveform and a reference must agree.",
        [
            FormatReader.FormatKey,
            Needed("tolerances", Shapes.Name("Name of the set.", "common-practice")),
            Needed("basis", new TextShape(
                "Where the figures come from; shown with every verdict.", "our model report")),
            Needed("limits", new ListShape("What must agree.", _limit, "limit", 1)),
        ],
        Sample: BlockShape.Shipped);
}
