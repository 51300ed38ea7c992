using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Tolerances;
using BenchRunner.Files;
using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Json;

/// <summary>Two waveform files compared, as JSON, all in SI: an error of 1 % is 0.01.</summary>
internal static class CompareJson
{
    public static void Write(ComparedFiles compared)
    {
        ComparisonResult result = compared.Result;
        ChannelComparison? whole = result.Whole;
        JsonOutput.Write(new JsonObject
        {
            ["measured"] = File(compared.Measured),
            ["reference"] = File(compared.Reference),
            ["window"] = result.Window is { } window
                ? new JsonObject
                {
                    ["from"] = JsonOutput.Number(window.From),
                    ["to"] = JsonOutput.Number(window.To),
                    ["meaning"] = window.Meaning,
                }
                : null,
            ["shift"] = JsonOutput.Number(result.Shift),
            ["reason"] = result.Reason ?? whole?.Reason,
            ["channel"] = result.Headline?.Name(),
            ["scalars"] = new JsonArray(
            [
                .. compared.Verdict.Limited.Select(one => Scalar(one.Scalar, one)),
                .. result.Others.Select(one => Scalar(one, null)),
            ]),
            ["nrmse"] = JsonOutput.Number(whole?.Nrmse),
            ["sprague_geers"] = Sprague(whole?.SpragueGeers),
            ["feature_selective"] = Features(whole?.FeatureSelective),
            ["channels"] = JsonOutput.Array(result.Channels, Channel),
            ["tolerances"] = new JsonObject
            {
                ["file"] = compared.Tolerances.Source.Path,
                ["sha256"] = compared.Tolerances.Source.Sha256,
                ["name"] = compared.Tolerances.Name,
                ["basis"] = compared.Tolerances.Basis,
            },
            ["inside"] = compared.Verdict.IsInside,
            ["outside"] = JsonOutput.Array(
                compared.Verdict.Outside, one => JsonValue.Create(one.Scalar.Quantity)),
        });
    }

    private static JsonObject File(ComparedFile file) => new()
    {
        ["file"] = file.File,
        ["sha256"] = file.Sha256,
        ["samples"] = file.Waveform.Count,
        ["sample_interval"] = JsonOutput.Number(file.Waveform.SampleInterval),
        ["channels"] = JsonOutput.Array(file.Waveform.Channels, channel => JsonValue.Create(channel.Name())),
    };

    private static JsonObject Scalar(ScalarComparison scalar, JudgedScalar? judged) => new()
    {
        ["quantity"] = scalar.Quantity,
        ["definition"] = scalar.Definition,
        ["unit"] = scalar.Unit,
        ["reference"] = JsonOutput.Number(scalar.Reference),
        ["measured"] = JsonOutput.Number(scalar.Measured),
        ["relative_error"] = JsonOutput.Number(scalar.RelativeError),
        ["reason"] = scalar.Reason,
        ["within"] = JsonOutput.Number(judged?.Within),
        ["inside"] = judged?.IsInside,
    };

    private static JsonObject Channel(ChannelComparison channel) => new()
    {
        ["channel"] = channel.Channel.Name(),
        ["own_shift"] = JsonOutput.Number(channel.OwnShift),
        ["nrmse"] = JsonOutput.Number(channel.Nrmse),
        ["sprague_geers"] = Sprague(channel.SpragueGeers),
        ["feature_selective"] = Features(channel.FeatureSelective),
        ["reason"] = channel.Reason,
    };

    private static JsonObject Sprague(SpragueGeers? errors) => new()
    {
        ["magnitude"] = JsonOutput.Number(errors?.Magnitude),
        ["phase"] = JsonOutput.Number(errors?.Phase),
        ["combined"] = JsonOutput.Number(errors?.Combined),
    };

    private static JsonObject Features(FeatureSelective? measures) => new()
    {
        ["adm"] = JsonOutput.Number(measures?.Amplitude),
        ["fdm"] = JsonOutput.Number(measures?.Feature),
        ["gdm"] = JsonOutput.Number(measures?.Global),
        ["adm_word"] = Word(measures?.Amplitude),
        ["fdm_word"] = Word(measures?.Feature),
        ["gdm_word"] = Word(measures?.Global),
    };

    private static string? Word(double? measure) => measure is { } number ? FeatureSelective.Word(number) : null;
}
