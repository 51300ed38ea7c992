using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>What a value in a file may be: the one description behind reader, messages and JSON Schema.</summary>
/// <param name="Meaning">What the value means, one sentence for the schema.</param>
internal abstract record Shape(string Meaning)
{
    /// <summary>What is expected, with its article, as messages say it: <c>a time above 0 s</c>.</summary>
    public abstract string Expected { get; }

    /// <summary>A value as it might be written.</summary>
    public abstract string Example { get; }

    /// <summary>Reads a node.</summary>
    /// <param name="node">The node.</param>
    /// <param name="label">What messages call it: its key.</param>
    /// <param name="around">The block it stands in; null at the root.</param>
    /// <param name="problems">Takes what is wrong.</param>
    /// <returns>The content (double, int, bool, string, pair, list, <see cref="Fields"/>); null where wrong.</returns>
    public abstract object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems);

    /// <summary>The JSON Schema of the value, without its meaning.</summary>
    public abstract JsonObject Schema();

    /// <summary>The JSON Schema of the value with its meaning.</summary>
    public JsonObject SchemaWithMeaning()
    {
        JsonObject schema = Schema();
        if (Meaning.Length > 0)
        {
            schema["description"] = Meaning;
        }

        return schema;
    }

    /// <summary>Reports that something else stands where this shape is wanted, unless that was said already.</summary>
    protected void Refuse(YamlNode node, string label, List<Problem> problems)
    {
        string? found = node switch
        {
            YamlScalar { Text: "", Quoted: false } => $"{label} is empty",
            YamlScalar scalar => $"{label} is {Shown.Quote(scalar.Text)}",
            YamlList { IsWhole: true } list => $"{label} is {(list.Items.Count == 0 ? "an empty list" : "a list")}",
            YamlMap { IsWhole: true } map => $"{label} is {(map.Entries.Count == 0 ? "an empty block" : "a block")}",
            _ => null,
        };
        if (found is not null)
        {
            problems.Add(new Problem(node.Where, found, Expected, Advice(node)));
        }
    }

    /// <summary>What to do about a wrong node.</summary>
    protected virtual string Advice(YamlNode node) => $"write it like {Example}";
}
