using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>One of some words.</summary>
/// <param name="Meaning">What it means.</param>
/// <param name="Words">The words.</param>
/// <param name="Wanted">What messages say in place of very many words; null: the words themselves.</param>
internal sealed record WordShape(string Meaning, IReadOnlyList<string> Words, string? Wanted = null) : Shape(Meaning)
{
    /// <inheritdoc/>
    public override string Expected => Wanted ?? (Words.Count == 1 ? $"the word {Words[0]}" : Shown.Or(Words));

    /// <inheritdoc/>
    public override string Example => Words[0];

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is YamlScalar scalar && Words.Contains(scalar.Text))
        {
            return scalar.Text;
        }

        Refuse(node, label, problems);
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema() => new()
    {
        ["enum"] = new JsonArray([.. Words.Select(word => JsonValue.Create(word))]),
    };

    /// <inheritdoc/>
    protected override string Advice(YamlNode node) =>
        node is YamlScalar scalar && Nearest.To(scalar.Text, Words) is { } near
            ? $"did you mean {near}?"
            : Words.Count == 1 ? "write that word" : "write one of them";
}
