using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Energy;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Energy;

/// <summary>The change of an energy with skew, by the record's own integral and by the whole analysis.</summary>
public sealed class SkewSensitivityTests
{
    // At turn-on the recovery's peak moves against the voltage's fall and the limits move with both: the first-order
    // formula is good to 20 %, at turn-off to 5 %.
    [Theory]
    [InlineData("hv650soft", "eon", true, false, 0.20)]
    [InlineData("hv650soft", "eoff", false, true, 0.05)]
    [InlineData("hv650snap", "eon", true, false, 0.20)]
    public void Both_agree(string scenario, string energy, bool fromMoves, bool toMoves, double relative)
    {
        const double skew = 0.1e-9;
        Waveform clean = Reference.Waveform($"{scenario}-clean.csv.gz");
        AnalysisSettings settings = Reference.Settings(scenario, measured: false) with { EveryDefinition = false };
        QuantityValue at = Energy(clean, settings, energy, 0);
        double byAnalysis =
            (Energy(clean, settings, energy, -skew).Value!.Value - Energy(clean, settings, energy, skew).Value!.Value)
            / (2 * skew);

        double bySamples = SkewSensitivity.Form(
            clean[Channel.VdsLow],
            clean[Channel.IdLow],
            clean.SampleInterval,
            (at.From!.Value - clean.TimeOrigin) / clean.SampleInterval,
            (at.To!.Value - clean.TimeOrigin) / clean.SampleInterval,
            fromMoves,
            toMoves);

        Assert.InRange(byAnalysis / bySamples, 1 - relative, 1 + relative);
    }

    /// <summary>The energy with the current taken as recorded late by a skew.</summary>
    private static QuantityValue Energy(Waveform clean, AnalysisSettings settings, string energy, double skew) =>
        WaveformAnalysis.Analyse(clean, settings with
        {
            Quantities = new HashSet<string> { energy },
            Corrections = new Dictionary<Channel, ChannelCorrection> { [Channel.IdLow] = new(Offset: 0, Skew: skew) },
        }).Quantities.Single();
}
