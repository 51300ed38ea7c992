using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>A value whose shape another key of its block chooses, e.g. a limit's unit by its quantity.</summary>
/// <param name="Meaning">What it means.</param>
/// <param name="By">The key that chooses.</param>
/// <param name="Shapes">That key's words and the shape that each chooses.</param>
internal sealed record ChosenShape(string Meaning, string By, IReadOnlyDictionary<string, Shape> Shapes)
    : Shape(Meaning)
{
    /// <inheritdoc/>
    public override string Expected => $"what the key {By} asks for";

    /// <inheritdoc/>
    public override string Example => Shapes.Values.First().Example;

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems) =>
        // Where the choosing key is missing or wrong, that has been said; nothing can be said about this value then.
        around?.Find(By) is YamlScalar word && Shapes.TryGetValue(word.Text, out Shape? shape)
            ? shape.Read(node, label, around, problems)
            : null;

    /// <inheritdoc/>
    public override JsonObject Schema() => [];

    /// <summary>The conditions of the block around: one for the words that choose the same shape.</summary>
    public IEnumerable<JsonNode> Choices(string key)
    {
        foreach (var same in Shapes.GroupBy(pair => pair.Value.Schema().ToJsonString()))
        {
            var words = new JsonArray([.. same.Select(pair => JsonValue.Create(pair.Key))]);
            yield return new JsonObject
            {
                ["if"] = new JsonObject
                {
                    ["properties"] = new JsonObject { [By] = new JsonObject { ["enum"] = words } },
                    ["required"] = new JsonArray(By),
                },
                ["then"] = new JsonObject
                {
                    ["properties"] = new JsonObject { [key] = same.First().Value.Schema() },
                },
            };
        }
    }
}
