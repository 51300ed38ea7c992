using System.Text.Encodings.Web;
using System.Text.Json;
using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Settings;
using BenchRunner.Acceptance.Tolerances;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>JSON Schemas (draft 2020-12) of our files, for editors; made of the tables that the readers use.</summary>
/// <remarks>
/// A schema knows single values and required keys. What holds between keys (names that are unique, limits at points
/// that exist) the readers alone check.
/// </remarks>
public static class SchemaText
{
    private static readonly Dictionary<string, BlockShape> _roots = new()
    {
        ["sequence"] = SequenceKeys.Root,
        ["bench"] = BenchKeys.Root,
        ["dialect"] = DialectKeys.Root,
        ["settings"] = SettingsKeys.Root,
        ["tolerances"] = TolerancesKeys.Root,
    };

    private static readonly JsonSerializerOptions _readable = new()
    {
        WriteIndented = true,
        Encoder = JavaScriptEncoder.UnsafeRelaxedJsonEscaping,
    };

    /// <summary>The kinds of file.</summary>
    public static IReadOnlyCollection<string> Kinds => _roots.Keys;

    /// <summary>The schema of a kind of file.</summary>
    /// <param name="kind">One of <see cref="Kinds"/>.</param>
    /// <returns>The schema as indented JSON.</returns>
    /// <exception cref="ArgumentException">The kind is not known.</exception>
    public static string Of(string kind)
    {
        if (!_roots.TryGetValue(kind, out BlockShape? root))
        {
            throw new ArgumentException($"There is no schema of '{kind}'.", nameof(kind));
        }

        var schema = new JsonObject
        {
            ["$schema"] = "https://json-schema.org/draft/2020-12/schema",
            ["title"] = $"BenchRunner {kind} file",
        };
        foreach ((string key, JsonNode? value) in root.SchemaWithMeaning())
        {
            schema[key] = value?.DeepClone();
        }

        return schema.ToJsonString(_readable);
    }
}
