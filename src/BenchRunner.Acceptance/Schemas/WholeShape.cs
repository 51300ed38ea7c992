using System.Globalization;
using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>A whole number, written plain.</summary>
/// <param name="Meaning">What it means.</param>
/// <param name="Low">The least.</param>
/// <param name="High">The largest.</param>
/// <param name="Sample">A number as it might be written.</param>
internal sealed record WholeShape(string Meaning, int Low, int High, int Sample) : Shape(Meaning)
{
    /// <inheritdoc/>
    public override string Expected => Low == High ? $"the number {Low}" : $"a whole number from {Low} to {High}";

    /// <inheritdoc/>
    public override string Example => Sample.ToString(CultureInfo.InvariantCulture);

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is YamlScalar { Quoted: false } scalar
            && int.TryParse(scalar.Text, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out int value)
            && value >= Low
            && value <= High)
        {
            return value;
        }

        Refuse(node, label, problems);
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema() => new() { ["type"] = "integer", ["minimum"] = Low, ["maximum"] = High };
}
