using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>A block of known keys.</summary>
/// <param name="Meaning">What it means.</param>
/// <param name="Keys">The keys, in the order in which they are usually written.</param>
/// <param name="AtLeast">The fewest keys, where none is required by itself.</param>
/// <param name="Sample">The block as it might be written; null: the keys that are required.</param>
internal sealed record BlockShape(string Meaning, IReadOnlyList<Key> Keys, int AtLeast = 0, string? Sample = null)
    : Shape(Meaning)
{
    /// <summary>The sample of whole files, which are too long for a message.</summary>
    public const string Shipped = "the examples in sequences/";

    /// <inheritdoc/>
    public override string Expected => AtLeast > 0
        ? $"a block with at least {AtLeast} of the keys {Names}"
        : Keys.Count <= 6
            ? $"a block with the keys {Names}"
            : $"a block that starts with {Keys[0].Name}: {Keys[0].Shape.Example}";

    /// <inheritdoc/>
    public override string Example => Sample ?? $"{{ {string.Join(
        ", ",
        Keys.Where(key => key.IsRequired || AtLeast > 0).Take(AtLeast > 0 ? AtLeast : int.MaxValue)
            .Select(key => $"{key.Name}: {key.Shape.Example}"))} }}";

    private string Names => string.Join(", ", Keys.Select(key => key.Name));

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is not YamlMap map || (map.IsWhole && map.Entries.Count < AtLeast))
        {
            Refuse(node, label, problems);
            return null;
        }

        var fields = new Fields(map.Where);
        var meant = new HashSet<string>(StringComparer.Ordinal);
        foreach (YamlEntry entry in map.Entries)
        {
            if (Keys.FirstOrDefault(key => key.Name == entry.Key) is not { } known)
            {
                string? near = Unknown(entry, label, map, problems);
                meant.Add(near ?? entry.Key);
                continue;
            }

            fields.Note(entry.Key, entry.At);
            if (known.Shape.Read(entry.Value, entry.Key, map, problems) is { } content)
            {
                fields.Add(entry.Key, entry.At, new Item(content, entry.Value.Where));
            }
        }

        // A key that is missing because it was misspelt has been named already.
        foreach (Key key in Keys.Where(key => key.IsRequired && map.IsWhole
            && map.Find(key.Name) is null && !meant.Contains(key.Name)))
        {
            problems.Add(new Problem(
                map.Where,
                $"{label} has no key {key.Name}",
                key.Shape.Expected,
                $"add {key.Name}: {key.Shape.Example}"));
        }

        return fields;
    }

    /// <inheritdoc/>
    public override JsonObject Schema()
    {
        var properties = new JsonObject();
        var choices = new List<JsonNode>();
        foreach (Key key in Keys)
        {
            properties[key.Name] = key.Shape.SchemaWithMeaning();
            if (key.Shape is ChosenShape chosen)
            {
                choices.AddRange(chosen.Choices(key.Name));
            }
        }

        var schema = new JsonObject
        {
            ["type"] = "object",
            ["properties"] = properties,
            ["required"] = new JsonArray(
                [.. Keys.Where(key => key.IsRequired).Select(key => JsonValue.Create(key.Name))]),
            ["additionalProperties"] = false,
        };
        if (AtLeast > 0)
        {
            schema["minProperties"] = AtLeast;
        }

        if (choices.Count > 0)
        {
            schema["allOf"] = new JsonArray([.. choices]);
        }

        return schema;
    }

    private string? Unknown(YamlEntry entry, string label, YamlMap map, List<Problem> problems)
    {
        IReadOnlyList<string> free = [.. Keys.Select(key => key.Name).Where(name => map.Find(name) is null)];
        string? near = Nearest.To(entry.Key, free);
        problems.Add(new Problem(
            entry.At,
            $"{Shown.Quote(entry.Key)} is no key of {label}",
            near is null ? $"one of {Names}" : "one of its keys",
            near is null ? "remove it or write one of these" : $"did you mean {near}?"));
        return near;
    }
}
