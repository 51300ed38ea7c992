using System.Text.Json.Nodes;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Json;

/// <summary>The catalogue of quantities as JSON.</summary>
internal static class CatalogueJson
{
    public static void Write(IReadOnlyList<Quantity> quantities) => JsonOutput.Write(new JsonObject
    {
        ["quantities"] = JsonOutput.Array(quantities, quantity => new JsonObject
        {
            ["quantity"] = quantity.Name,
            ["unit"] = quantity.Unit,
            ["owner"] = quantity.Owner.ToString().ToLowerInvariant(),
            ["meaning"] = quantity.Meaning,
            ["definitions"] = JsonOutput.Array(quantity.Definitions, definition => new JsonObject
            {
                ["definition"] = definition.Id,
                ["rule"] = definition.Rule,
            }),
        }),
    });
}
