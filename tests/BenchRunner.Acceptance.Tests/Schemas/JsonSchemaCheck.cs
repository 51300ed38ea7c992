using System.Text.Json;
using System.Text.Json.Nodes;
using System.Text.RegularExpressions;

namespace BenchRunner.Acceptance.Tests.Schemas;

/// <summary>Holds a JSON value against a schema: the keywords of JSON Schema 2020-12 that ours use, and no
/// others.</summary>
internal static class JsonSchemaCheck
{
    private static readonly string[] _notes = ["$schema", "title", "description", "examples", "format", "then"];

    public static bool Accepts(JsonNode schema, JsonNode? value) =>
        schema.AsObject().All(keyword => Holds(keyword.Key, keyword.Value!, schema.AsObject(), value));

    private static bool Holds(string keyword, JsonNode rule, JsonObject schema, JsonNode? value) => keyword switch
    {
        "type" => (rule.GetValue<string>(), TypeOf(value)) is var (wanted, found)
            && (wanted == found || (wanted, found) is ("number", "integer")),
        "enum" => rule.AsArray().Any(known => JsonNode.DeepEquals(known, value)),
        "pattern" => value is not JsonValue || TypeOf(value) != "string" || Matches(rule, value.GetValue<string>()),
        "minLength" => TypeOf(value) != "string" || value!.GetValue<string>().Length >= rule.GetValue<int>(),
        "maxLength" => TypeOf(value) != "string" || value!.GetValue<string>().Length <= rule.GetValue<int>(),
        "minimum" => !IsNumber(value) || value!.GetValue<double>() >= rule.GetValue<double>(),
        "maximum" => !IsNumber(value) || value!.GetValue<double>() <= rule.GetValue<double>(),
        "items" => value is not JsonArray array || array.All(item => Accepts(rule, item)),
        "minItems" => value is not JsonArray array || array.Count >= rule.GetValue<int>(),
        "maxItems" => value is not JsonArray array || array.Count <= rule.GetValue<int>(),
        "properties" => value is not JsonObject map
            || map.All(pair => rule[pair.Key] is not { } known || Accepts(known, pair.Value)),
        "patternProperties" => value is not JsonObject map || map.All(pair => rule.AsObject().All(
            known => !Matches(known.Key, pair.Key) || Accepts(known.Value!, pair.Value))),
        "additionalProperties" => value is not JsonObject map || map.All(pair => IsNamed(schema, pair.Key)),
        "required" => value is not JsonObject map
            || rule.AsArray().All(name => map.ContainsKey(name!.GetValue<string>())),
        "minProperties" => value is not JsonObject map || map.Count >= rule.GetValue<int>(),
        "anyOf" => rule.AsArray().Any(one => Accepts(one!, value)),
        "allOf" => rule.AsArray().All(one => Accepts(one!, value)),
        "if" => !Accepts(rule, value) || Accepts(schema["then"]!, value),
        _ when _notes.Contains(keyword) => true,
        _ => throw new NotSupportedException(keyword),
    };

    private static bool IsNumber(JsonNode? value) => TypeOf(value) is "integer" or "number";

    private static bool IsNamed(JsonObject schema, string key) =>
        schema["properties"]?[key] is not null
        || (schema["patternProperties"]?.AsObject().Any(known => Matches(known.Key, key)) ?? false);

    private static bool Matches(JsonNode pattern, string text) => Matches(pattern.GetValue<string>(), text);

    private static bool Matches(string pattern, string text) => Regex.IsMatch(text, pattern);

    private static string TypeOf(JsonNode? value) => value?.GetValueKind() switch
    {
        JsonValueKind.Object => "object",
        JsonValueKind.Array => "array",
        JsonValueKind.String => "string",
        JsonValueKind.True or JsonValueKind.False => "boolean",
        JsonValueKind.Number => value.GetValue<double>() == Math.Floor(value.GetValue<double>()) ? "integer" : "number",
        _ => "null",
    };
}
