using System.Globalization;
using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Schemas;
using BenchRunner.Acceptance.Tests.Files;
using YamlDotNet.Core;
using YamlDotNet.RepresentationModel;

namespace BenchRunner.Acceptance.Tests.Schemas;

/// <summary>Schemas and readers come from one table; here both are held against each other and the shipped
/// files.</summary>
public sealed class SchemaTextTests
{
    /// <summary>Keys that another key needs, which no schema says.</summary>
    private static readonly string[] _neededByAnother =
    [
        "bench/fake", "bench/shunt", "bench/safety/guardian-silence",
        "sequence/limits/*/at-most", "sequence/limits/*/at-least", "sequence/limits/*/between",
    ];

    public static TheoryData<string> Kinds => [.. SchemaText.Kinds];

    public static TheoryData<string, string> Files => new(
        Directory.GetFiles(Repository.PathOf("sequences"), "*.yaml", SearchOption.AllDirectories)
            .Select(path => (KindOf(path), Path.GetRelativePath(Repository.Root, path))));

    [Theory]
    [MemberData(nameof(Kinds))]
    public void A_schema_says_which_draft_and_what_it_is(string kind)
    {
        JsonNode schema = Schema(kind);
        Assert.Equal("https://json-schema.org/draft/2020-12/schema", schema["$schema"]?.GetValue<string>());
        Assert.Equal($"BenchRunner {kind} file", schema["title"]?.GetValue<string>());
        Assert.False(schema["additionalProperties"]!.GetValue<bool>());
    }

    [Theory]
    [MemberData(nameof(Kinds))]
    public void Each_key_of_a_schema_says_what_it_means(string kind)
    {
        foreach ((string path, JsonObject schema) in Properties(Schema(kind), ""))
        {
            Assert.False(string.IsNullOrEmpty(schema["description"]?.GetValue<string>()), path);
        }
    }

    [Theory]
    [MemberData(nameof(Files))]
    public void A_shipped_file_agrees_with_its_schema(string kind, string path) =>
        Assert.True(JsonSchemaCheck.Accepts(Schema(kind), Json(File.ReadAllText(Repository.PathOf(path)))), path);

    [Fact]
    public void Settings_agree_with_their_schema() =>
        Assert.True(JsonSchemaCheck.Accepts(Schema("settings"), Json(Examples.Settings)));

    [Theory]
    [MemberData(nameof(Kinds))]
    public void The_guide_to_the_files_names_each_key(string kind)
    {
        string guide = File.ReadAllText(Repository.PathOf("docs", "files.md"));
        // Keys of definitions are quantities, which have a document of their own.
        IEnumerable<string> keys = Properties(Schema(kind), "").Select(key => key.Path)
            .Where(path => !path.StartsWith("/definitions/", StringComparison.Ordinal))
            .Select(path => path[(path.LastIndexOf('/') + 1)..]);
        Assert.All(keys, key => Assert.Contains($"`{key}`", guide, StringComparison.Ordinal));
    }

    [Fact]
    public void An_unknown_kind_of_schema_is_a_mistake_of_the_caller() =>
        Assert.Throws<ArgumentException>(() => SchemaText.Of("waveform"));

    [Theory]
    [MemberData(nameof(Kinds))]
    public void Reader_and_schema_agree_on_each_key_that_is_taken_away(string kind)
    {
        JsonNode schema = Schema(kind);
        foreach (string path in Paths(Json(Text(kind)), ""))
        {
            JsonNode file = Json(Text(kind));
            Change(file, path, (map, key) => map.Remove(key));
            bool isSound = IsSound(kind, file);
            string general = string.Join('/', path.Split('/').Select(part => int.TryParse(part, out _) ? "*" : part));
            bool expected = JsonSchemaCheck.Accepts(schema, file) && !_neededByAnother.Contains(kind + general);
            Assert.True(isSound == expected, $"{kind} without {path}: reader {isSound}, schema and rules {expected}");
        }
    }

    [Theory]
    [MemberData(nameof(Kinds))]
    public void Reader_and_schema_refuse_each_key_that_is_misspelt(string kind)
    {
        JsonNode schema = Schema(kind);
        foreach (string path in Paths(Json(Text(kind)), ""))
        {
            JsonNode file = Json(Text(kind));
            Change(file, path, (map, key) =>
            {
                JsonNode? value = map[key];
                map.Remove(key);
                map[key + "x"] = value;
            });
            Assert.False(IsSound(kind, file), path);
            Assert.False(JsonSchemaCheck.Accepts(schema, file), path);
        }
    }

    [Theory]
    [MemberData(nameof(Kinds))]
    public void Reader_and_schema_refuse_a_list_of_lists_in_place_of_each_value(string kind)
    {
        JsonNode schema = Schema(kind);
        foreach (string path in Paths(Json(Text(kind)), ""))
        {
            JsonNode file = Json(Text(kind));
            Change(file, path, (map, key) => map[key] = new JsonArray(new JsonArray()));
            Assert.False(IsSound(kind, file), path);
            Assert.False(JsonSchemaCheck.Accepts(schema, file), path);
        }
    }

    private static JsonNode Schema(string kind) => JsonNode.Parse(SchemaText.Of(kind))!;

    private static string Text(string kind) => Examples.All.Single(example => example.Kind == kind).Text;

    private static string KindOf(string path) => Path.GetFileName(Path.GetDirectoryName(path)) switch
    {
        "benches" => "bench",
        "dialects" => "dialect",
        "tolerances" => "tolerances",
        _ => "sequence",
    };

    /// <summary>JSON is YAML: the readers take it.</summary>
    private static bool IsSound(string kind, JsonNode file) =>
        Readers.Problems(Readers.Source(kind + ".yaml", file.ToJsonString())).Count == 0;

    private static void Change(JsonNode file, string path, Action<JsonObject, string> change)
    {
        string[] parts = path.Split('/')[1..];
        JsonNode at = file;
        foreach (string part in parts[..^1])
        {
            at = at is JsonArray list ? list[int.Parse(part, CultureInfo.InvariantCulture)]! : at[part]!;
        }

        change(at.AsObject(), parts[^1]);
    }

    private static IEnumerable<string> Paths(JsonNode? node, string path)
    {
        IEnumerable<(string Key, JsonNode? Value)> below = node switch
        {
            JsonObject map => map.Select(pair => (pair.Key, pair.Value)),
            JsonArray list => list.Select((item, i) => (i.ToString(CultureInfo.InvariantCulture), item)),
            _ => [],
        };
        foreach ((string key, JsonNode? value) in below)
        {
            if (node is JsonObject)
            {
                yield return $"{path}/{key}";
            }

            foreach (string deeper in Paths(value, $"{path}/{key}"))
            {
                yield return deeper;
            }
        }
    }

    private static IEnumerable<(string Path, JsonObject Schema)> Properties(JsonNode? schema, string path)
    {
        foreach ((string key, JsonNode? value) in schema?["properties"]?.AsObject() ?? [])
        {
            yield return ($"{path}/{key}", value!.AsObject());
            foreach (var deeper in Properties(value, $"{path}/{key}"))
            {
                yield return deeper;
            }

            foreach (var deeper in Properties(value!["items"], $"{path}/{key}"))
            {
                yield return deeper;
            }
        }
    }

    private static JsonNode Json(string text)
    {
        var yaml = new YamlStream();
        yaml.Load(new StringReader(text));
        return Json(yaml.Documents[0].RootNode)!;
    }

    private static JsonNode? Json(YamlNode node) => node switch
    {
        YamlMappingNode map => new JsonObject(map.Children.Select(
            pair => KeyValuePair.Create(((YamlScalarNode)pair.Key).Value!, Json(pair.Value)))),
        YamlSequenceNode list => new JsonArray([.. list.Children.Select(Json)]),
        YamlScalarNode { Style: ScalarStyle.Plain, Value: "true" or "false" } flag =>
            JsonValue.Create(flag.Value == "true"),
        YamlScalarNode { Style: ScalarStyle.Plain } plain
            when double.TryParse(plain.Value, NumberStyles.Float, CultureInfo.InvariantCulture, out double number)
            => JsonValue.Create(number),
        YamlScalarNode scalar => JsonValue.Create(scalar.Value),
        _ => throw new NotSupportedException(),
    };
}
