using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Energy;

/// <summary>The change of an energy with skew, by the record's own integral and by the whole analysis.</summary>
public sealed class SkewSensitivityTests
{
    [Theory]
    [InlineData("hv650soft", "eon")]
    [InlineData("hv650soft", "eoff")]
    [InlineData("hv650soft", "err")]
    [InlineData("hv650snap", "eon")]
    [InlineData("hv650snap", "err")]
    [InlineData("lv40", "eon")]
    [InlineData("lv40", "eoff")]
    public void Both_agree(string scenario, string energy)
    {
        const double skew = 0.1e-9;
        Waveform clean = Reference.Waveform($"{scenario}-clean.csv.gz");
        AnalysisSettings settings = Reference.Settings(scenario, measured: false) with { EveryDefinition = false };
        QuantityValue at = Energy(clean, settings, energy, 0);
        double byAnalysis =
            (Energy(clean, settings, energy, -skew).Value!.Value - Energy(clean, settings, energy, skew).Value!.Value)
            / (2 * skew);

        double bySamples = at.PerSkew!.Value;

        Assert.InRange(byAnalysis / bySamples, 0.97, 1.03);
    }

    /// <summary>The energy with the current taken as recorded late by a skew.</summary>
    private static QuantityValue Energy(Waveform clean, AnalysisSettings settings, string energy, double skew) =>
        WaveformAnalysis.Analyse(clean, settings with
        {
            Quantities = new HashSet<string> { energy },
            Corrections = new Dictionary<Channel, ChannelCorrection>
            {
                [Channel.IdLow] = new(Offset: 0, Skew: skew),
                [Channel.IdHigh] = new(Offset: 0, Skew: skew),
            },
        }).Quantities.Single();
}
