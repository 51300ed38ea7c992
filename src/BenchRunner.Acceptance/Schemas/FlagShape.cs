using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>Yes or no: <c>true</c> or <c>false</c>.</summary>
/// <param name="Meaning">What it means.</param>
internal sealed record FlagShape(string Meaning) : Shape(Meaning)
{
    /// <inheritdoc/>
    public override string Expected => "true or false";

    /// <inheritdoc/>
    public override string Example => "true";

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        switch (node)
        {
            case YamlScalar { Quoted: false, Text: "true" }:
                return true;
            case YamlScalar { Quoted: false, Text: "false" }:
                return false;
            default:
                Refuse(node, label, problems);
                return null;
        }
    }

    /// <inheritdoc/>
    public override JsonObject Schema() => new() { ["type"] = "boolean" };
}
