using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Files;
using BenchRunner.Json;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Console;

/// <summary>The quantities of a waveform as aligned lines.</summary>
internal static class AnalysisText
{
    public static IEnumerable<string> Lines(AnalysedFile analysed)
    {
        yield return $"{analysed.Name}: {analysed.Waveform.Count} samples at "
            + $"{SiText.Format(analysed.Waveform.SampleInterval, "s")}, "
            + string.Join(' ', analysed.Waveform.Channels.Select(channel => channel.Name()))
            + $"; rest of the current: {Words.Of(analysed.Result.Train.Baseline)}";
        int name = analysed.Result.Quantities.Max(value => value.Quantity.Length);
        int definition = analysed.Result.Quantities.Max(value => value.Definition.Length);
        foreach (QuantityValue value in analysed.Result.Quantities)
        {
            string shown = value.Value is { } number
                ? SiText.Format(number, value.Unit, 5) : $"no value: {value.Reason}";
            string perSkew = value.PerSkew is { } watts ? $"  {SiText.Format(watts * 1e-9, "J", 3)}/ns of skew" : "";
            yield return $"  {value.Quantity.PadRight(name)}  {value.Definition.PadRight(definition)}  {shown}{perSkew}";
        }

        foreach (Finding finding in analysed.Verdict.Findings)
        {
            yield return $"  finding {finding.Criterion} ({finding.Class.ToString().ToLowerInvariant()}): "
                + $"{finding.Message}";
        }

        yield return $"  not evaluated: {string.Join(", ", analysed.Verdict.NotEvaluated)}";
    }
}
