using System.Text.Json;
using BenchRunner.Acceptance.Tests.Files;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Validity;

/// <summary>What must and what must not be found in each reference record, clean and with a recording chain's
/// errors.</summary>
/// <remarks>Source: <c>findings</c> of tests/reference/waveforms/tolerances.json, made beside the simulated circuits by
/// whoever chose their flaws.</remarks>
public sealed class ReferenceFindingsTests
{
    [Theory]
    [InlineData("lv40", "clean")]
    [InlineData("lv40", "measured")]
    [InlineData("hv650soft", "clean")]
    [InlineData("hv650soft", "measured")]
    [InlineData("hv650snap", "clean")]
    [InlineData("hv650snap", "measured")]
    [InlineData("saturating", "clean")]
    [InlineData("saturating", "measured")]
    [InlineData("shorted", "clean")]
    [InlineData("shorted", "measured")]
    public void A_record_has_the_findings_that_it_must_have_and_none_that_it_must_not(string scenario, string mode)
    {
        using JsonDocument tolerances = Json("tolerances.json");
        JsonElement findings = tolerances.RootElement.GetProperty("findings").GetProperty(scenario);
        AnalysisSettings settings = new()
        {
            HighSideThreshold = findings.GetProperty("needs").GetProperty("high_side_threshold_V").GetDouble(),
            Corrections = mode == "measured" ? Chain(scenario) : new Dictionary<Channel, ChannelCorrection>(),
        };
        Waveform waveform = Read($"{scenario}-{mode}");
        Verdict verdict = WaveformFindings.Judge(waveform, WaveformAnalysis.Analyse(waveform, settings), settings);
        HashSet<string> found = [];
        foreach (Finding finding in verdict.Findings)
        {
            found.Add(finding.Criterion);
            found.Add($"{finding.Criterion}/{finding.Class.ToString().ToLowerInvariant()}");
        }

        foreach (JsonElement must in findings.GetProperty(mode).GetProperty("must").EnumerateArray())
        {
            Assert.Contains(must.GetString()!, found);
        }

        foreach (JsonElement not in findings.GetProperty(mode).GetProperty("must_not").EnumerateArray())
        {
            Assert.DoesNotContain(not.GetString()!, found);
        }
    }

    private static Dictionary<Channel, ChannelCorrection> Chain(string scenario)
    {
        using JsonDocument chain = Json($"{scenario}-measured.json");
        return chain.RootElement.GetProperty("channels").EnumerateObject().ToDictionary(
            channel => ChannelNames.Parse(channel.Name)!.Value,
            channel => new ChannelCorrection(
                channel.Value.GetProperty("gain").GetDouble(),
                channel.Value.GetProperty("offset").GetDouble(),
                channel.Value.GetProperty("skew_s").GetDouble()));
    }

    private static JsonDocument Json(string name) =>
        JsonDocument.Parse(File.ReadAllBytes(Repository.PathOf("tests", "reference", "waveforms", name)));

    private static Waveform Read(string name) => WaveformFile.Read(
        Repository.PathOf("tests", "reference", "waveforms", $"{name}.csv.gz")).Waveform!;
}
