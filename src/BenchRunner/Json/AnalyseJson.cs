using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Files;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Json;

/// <summary>What was found in waveform files, as JSON.</summary>
internal static class AnalyseJson
{
    public static void Write(IReadOnlyList<AnalysedFile> files) => JsonOutput.Write(new JsonObject
    {
        ["waveforms"] = JsonOutput.Array(files, Waveform),
    });

    private static JsonObject Waveform(AnalysedFile file)
    {
        JsonObject waveform = new()
        {
            ["file"] = file.File,
            ["sha256"] = file.Sha256,
            ["samples"] = file.Waveform.Count,
            ["sample_interval"] = JsonOutput.Number(file.Waveform.SampleInterval),
            ["channels"] = JsonOutput.Array(file.Waveform.Channels, channel => JsonValue.Create(channel.Name())),
            ["baseline"] = Words.Of(file.Result.Train.Baseline),
            ["quantities"] = JsonOutput.Array(file.Result.Quantities, Quantity),
            ["findings"] = JsonOutput.Array(file.Verdict.Findings, Finding),
            ["not_evaluated"] = JsonOutput.Array(file.Verdict.NotEvaluated, name => JsonValue.Create(name)),
        };
        if (file.Capture is { } capture)
        {
            waveform["device"] = capture.Device;
            waveform["run"] = capture.Run;
            waveform["operating_point"] = capture.OperatingPoint;
            waveform["capture"] = capture.Number;
        }

        return waveform;
    }

    private static JsonObject Quantity(QuantityValue value)
    {
        JsonObject quantity = new()
        {
            ["quantity"] = value.Quantity,
            ["definition"] = value.Definition,
            ["value"] = JsonOutput.Number(value.Value),
            ["unit"] = value.Unit,
            ["reason"] = value.Reason,
            ["from"] = JsonOutput.Number(value.From),
            ["to"] = JsonOutput.Number(value.To),
        };
        if (value.PerSkew is { } perSkew)
        {
            quantity["per_skew"] = JsonOutput.Number(perSkew);
        }

        return quantity;
    }

    private static JsonObject Finding(Finding finding) => new()
    {
        ["criterion"] = finding.Criterion,
        ["class"] = finding.Class.ToString().ToLowerInvariant(),
        ["channel"] = finding.Channel?.Name(),
        ["seen"] = JsonOutput.Number(finding.Seen),
        ["bound"] = JsonOutput.Number(finding.Bound),
        ["at"] = JsonOutput.Number(finding.At),
        ["message"] = finding.Message,
    };
}
