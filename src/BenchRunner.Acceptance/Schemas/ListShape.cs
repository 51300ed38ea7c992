using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>A list of one kind of item.</summary>
/// <param name="Meaning">What it means.</param>
/// <param name="Item">The items.</param>
/// <param name="ItemName">What an item is called in messages, e.g. <c>operating point</c>.</param>
/// <param name="AtLeast">The fewest items.</param>
internal sealed record ListShape(string Meaning, Shape Item, string ItemName, int AtLeast = 0) : Shape(Meaning)
{
    /// <inheritdoc/>
    public override string Expected => AtLeast == 0 ? "a list" : $"a list of at least {AtLeast} {ItemName}";

    /// <inheritdoc/>
    public override string Example => $"[{Item.Example}]";

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is not YamlList list || (list.IsWhole && list.Items.Count < AtLeast))
        {
            Refuse(node, label, problems);
            return null;
        }

        var items = new List<Item>();
        for (int i = 0; i < list.Items.Count; i++)
        {
            if (Item.Read(list.Items[i], $"{ItemName} {i + 1}", null, problems) is { } content)
            {
                items.Add(new Item(content, list.Items[i].Where));
            }
        }

        return (IReadOnlyList<Item>)items;
    }

    /// <inheritdoc/>
    public override JsonObject Schema()
    {
        var schema = new JsonObject { ["type"] = "array", ["items"] = Item.SchemaWithMeaning() };
        if (AtLeast > 0)
        {
            schema["minItems"] = AtLeast;
        }

        return schema;
    }
}
