using System.Text.Json.Nodes;
using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>A line of text.</summary>
/// <param name="Meaning">What it means.</param>
/// <param name="Sample">A text as it might be written.</param>
/// <param name="Pattern">Regular expression that the whole text must match; null: any visible text.</param>
/// <param name="Wanted">What the pattern asks for, with its article; null where there is none.</param>
internal sealed record TextShape(string Meaning, string Sample, string? Pattern = null, string? Wanted = null)
    : Shape(Meaning)
{
    /// <summary>Longest text, characters.</summary>
    public const int Longest = 200;

    private readonly Lazy<Regex?> _whole =
        new(() => Pattern is null ? null : new Regex($@"\A(?:{Pattern})\z", RegexOptions.CultureInvariant));

    /// <inheritdoc/>
    public override string Expected => Wanted ?? $"a line of 1 to {Longest} visible characters";

    /// <inheritdoc/>
    public override string Example => Sample;

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is YamlScalar { Text.Length: > 0 and <= Longest } scalar
            && !scalar.Text.Any(Shown.Acts)
            && _whole.Value?.IsMatch(scalar.Text) != false)
        {
            return scalar.Text;
        }

        Refuse(node, label, problems);
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema()
    {
        var schema = new JsonObject { ["type"] = "string", ["minLength"] = 1, ["maxLength"] = Longest };
        if (Pattern is not null)
        {
            schema["pattern"] = $"^(?:{Pattern})$";
        }

        schema["examples"] = new JsonArray(Example);
        return schema;
    }
}
