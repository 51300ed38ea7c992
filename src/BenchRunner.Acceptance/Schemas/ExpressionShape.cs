using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>A regular expression that a whole text must match.</summary>
/// <param name="Meaning">What it is for.</param>
/// <param name="Sample">An expression as it might be written.</param>
internal sealed record ExpressionShape(string Meaning, string Sample) : Shape(Meaning)
{
    /// <inheritdoc/>
    public override string Expected => "a regular expression without look-around and back references";

    /// <inheritdoc/>
    public override string Example => $"'{Sample}'";

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is YamlScalar { Text.Length: > 0 and <= TextShape.Longest } scalar
            && Expression.Of(scalar.Text) is not null)
        {
            return scalar.Text;
        }

        Refuse(node, label, problems);
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema() => new()
    {
        ["type"] = "string",
        ["format"] = "regex",
        ["minLength"] = 1,
        ["maxLength"] = TextShape.Longest,
    };
}
