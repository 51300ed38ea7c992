using System.Text.Json.Serialization;
using BenchRunner.Acceptance.Events;

namespace BenchRunner.Runner.Guarding;

/// <summary>The form of a line of the guardian's log.</summary>
[JsonSourceGenerationOptions(
    PropertyNamingPolicy = JsonKnownNamingPolicy.SnakeCaseLower, UseStringEnumConverter = true)]
[JsonSerializable(typeof(BenchEvent))]
internal sealed partial class GuardianJson : JsonSerializerContext;
