using System.Text.Json;
using System.Text.Json.Nodes;

namespace BenchRunner.Json;

/// <summary>Writes the one JSON document of a command: plain SI numbers, null where a value could not be
/// formed.</summary>
internal static class JsonOutput
{
    private static readonly JsonSerializerOptions Indented = new() { WriteIndented = true };

    /// <summary>Writes a document with <c>format: 1</c> in front.</summary>
    public static void Write(JsonObject document)
    {
        document.Insert(0, "format", 1);
        System.Console.Out.WriteLine(document.ToJsonString(Indented));
    }

    /// <summary>A number; null where it is none or not finite, which JSON cannot hold.</summary>
    public static JsonNode? Number(double? value) =>
        value is { } number && double.IsFinite(number) ? JsonValue.Create(number) : null;

    /// <summary>A value of the evidence: text, whole number, number or null.</summary>
    public static JsonNode? Cell(object? value) => value switch
    {
        null => null,
        double number => Number(number),
        long whole => JsonValue.Create(whole),
        _ => JsonValue.Create(value.ToString()),
    };

    /// <summary>An array of what each item becomes.</summary>
    public static JsonArray Array<T>(IEnumerable<T> items, Func<T, JsonNode?> each) => [.. items.Select(each)];
}
