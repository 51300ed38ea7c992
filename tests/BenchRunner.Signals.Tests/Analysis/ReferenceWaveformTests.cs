using System.Globalization;
using System.Text.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>
/// Waveforms of a general-purpose circuit simulator against values extracted by code that shares nothing with ours,
/// within the tolerances stated beside them (tests/reference/waveforms/README.md).
/// </summary>
public sealed class ReferenceWaveformTests(ITestOutputHelper output)
{
    [Theory]
    [InlineData("lv40", 110)]
    [InlineData("hv650soft", 109)]
    [InlineData("hv650snap", 109)]
    [InlineData("saturating", 98)]
    [InlineData("shorted", 10)]
    public void Clean_records_agree_with_the_independent_extraction(string scenario, int tested) =>
        Check(scenario, "clean", tested);

    [Theory]
    [InlineData("lv40", 57)]
    [InlineData("hv650soft", 65)]
    [InlineData("hv650snap", 68)]
    [InlineData("saturating", 55)]
    [InlineData("shorted", 9)]
    public void Measured_records_agree_with_the_independent_extraction(string scenario, int tested) =>
        Check(scenario, "measured", tested);

    private void Check(string scenario, string mode, int tested)
    {
        Dictionary<(string, string), QuantityValue> got = Analyse(scenario, mode);
        using JsonDocument reference = Reference.Json($"waveforms/{scenario}-reference.json");
        using JsonDocument tolerances = Reference.Json("waveforms/tolerances.json");
        JsonElement truth = reference.RootElement.GetProperty("truth");
        int agree = 0;
        List<string> wrong = [];
        foreach (JsonElement entry in tolerances.RootElement.GetProperty("tolerances").EnumerateArray())
        {
            string quantity = entry.GetProperty("quantity").GetString()!;
            string definition = entry.GetProperty("definition").GetString()!;
            if (Bound(entry, scenario, mode) is not { } bound
                || !truth.TryGetProperty(quantity, out JsonElement definitions)
                || !definitions.TryGetProperty(definition, out JsonElement expected))
            {
                continue;
            }

            double wanted = expected.GetDouble();
            double allowed = bound.TryGetProperty("abs", out JsonElement absolute)
                ? absolute.GetDouble()
                : bound.GetProperty("rel").GetDouble() * Math.Abs(wanted);
            QuantityValue? value = got.GetValueOrDefault((quantity, definition));
            if (value?.Value is not { } number)
            {
                if (!entry.TryGetProperty("optional", out _))
                {
                    wrong.Add($"{quantity} {definition}: no value: {value?.Reason ?? "not given"}");
                }
            }
            else if (Math.Abs(number - wanted) > allowed)
            {
                wrong.Add(string.Create(
                    CultureInfo.InvariantCulture,
                    $"{quantity} {definition}: {number:G7}, truth {wanted:G7}, {100 * ((number / wanted) - 1):F3} %, "
                    + $"{Math.Abs(number - wanted) / allowed:F2} of the tolerance"));
            }
            else
            {
                agree++;
            }
        }

        wrong.AddRange(GivenWhereThereIsNone(tolerances.RootElement, got, scenario, mode));
        output.WriteLine($"{scenario} {mode}: {agree} agree");
        Assert.True(wrong.Count == 0, $"{agree} agree; {wrong.Count} do not:\n{string.Join('\n', wrong)}");
        Assert.Equal(tested, agree);
    }

    /// <summary>Every definition, and <c>qrr/window-T</c> for each time that the reference has.</summary>
    private static Dictionary<(string, string), QuantityValue> Analyse(string scenario, string mode)
    {
        Waveform waveform = Reference.Waveform($"{scenario}-{mode}.csv.gz");
        AnalysisSettings settings = Reference.Settings(scenario, mode == "measured");
        Dictionary<(string, string), QuantityValue> got = [];
        foreach (double time in (ReadOnlySpan<double>)[50e-9, 100e-9, 200e-9])
        {
            foreach (QuantityValue value in WaveformAnalysis.Analyse(
                waveform, settings with { IntegrationTime = time }).Quantities)
            {
                got[(value.Quantity, value.Definition)] = value;
            }
        }

        return got;
    }

    private static JsonElement? Bound(JsonElement entry, string scenario, string mode)
    {
        JsonElement bound = entry.GetProperty(mode);
        if (entry.TryGetProperty("scenarios", out JsonElement scenarios)
            && scenarios.TryGetProperty(scenario, out JsonElement exception)
            && exception.TryGetProperty(mode, out JsonElement other))
        {
            bound = other;
        }

        return bound.ValueKind == JsonValueKind.Null ? null : bound;
    }

    private static IEnumerable<string> GivenWhereThereIsNone(
        JsonElement tolerances, Dictionary<(string, string), QuantityValue> got, string scenario, string mode)
    {
        JsonElement listed = tolerances.GetProperty("no_value").GetProperty(scenario).GetProperty(mode);
        foreach (JsonElement none in listed.EnumerateArray())
        {
            (string, string) key = (none[0].GetString()!, none[1].GetString()!);
            string reason = none[2].GetString()!;
            QuantityValue? value = got.GetValueOrDefault(key);
            if (value is null || value.Value is not null || value.Reason != reason)
            {
                yield return string.Create(
                    CultureInfo.InvariantCulture,
                    $"{key}: {value?.Value:G7} {value?.Reason} where there is none: {reason}");
            }
        }
    }
}
