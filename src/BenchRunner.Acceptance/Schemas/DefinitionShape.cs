using System.Text.Json.Nodes;
using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Files;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>The ID of a definition of one quantity, with or without the route of the diode's current.</summary>
/// <param name="Quantity">The quantity.</param>
internal sealed record DefinitionShape(Quantity Quantity) : Shape($"Definition of {Quantity.Name}.")
{
    private const string WindowExample = "qrr/window-100ns";

    /// <inheritdoc/>
    public override string Expected => Shown.Or([.. Written]);

    /// <inheritdoc/>
    public override string Example => Quantity.Definitions[0].Id;

    private IEnumerable<string> Written =>
        Quantity.Definitions.Select(known => known.Id == DefinitionId.WindowTemplate ? WindowExample : known.Id);

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        // The template itself names no time.
        if (node is YamlScalar scalar
            && Quantity.Find(scalar.Text) is not null
            && DefinitionId.Split(scalar.Text).Rule != DefinitionId.WindowTemplate)
        {
            return scalar.Text;
        }

        Refuse(node, $"the definition of {Quantity.Name}", problems);
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema() => new()
    {
        ["type"] = "string",
        ["pattern"] = $"^({string.Join('|', Quantity.Definitions.Select(Pattern))})$",
        ["examples"] = new JsonArray([.. Written.Select(id => JsonValue.Create(id))]),
    };

    /// <inheritdoc/>
    protected override string Advice(YamlNode node) =>
        node is YamlScalar scalar && Nearest.To(scalar.Text, Written) is { } near
            ? $"did you mean {near}?"
            : "write one of them";

    private static string Pattern(QuantityDefinition definition)
    {
        string rule = definition.Id == DefinitionId.WindowTemplate
            ? @"qrr/window-[0-9]+(\.[0-9]+)?ns"
            : Regex.Escape(definition.Id);
        return definition.HasRoutes ? $"{rule}({DefinitionId.LoadLineRoute})?" : rule;
    }
}
