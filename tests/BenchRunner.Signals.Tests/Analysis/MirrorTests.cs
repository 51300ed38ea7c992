using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

public sealed class MirrorTests
{
    [Theory]
    [InlineData("lv40")]
    [InlineData("hv650soft")]
    public void Swapped_channels_and_position_high_give_the_same_bits(string scenario)
    {
        Waveform low = Reference.Waveform($"{scenario}-clean.csv.gz");
        AnalysisSettings settings = Reference.Settings(scenario, measured: false);
        Waveform high = new(low.TimeOrigin, low.SampleInterval, new Dictionary<Channel, double[]>
        {
            [Channel.VgsHigh] = low[Channel.VgsLow].ToArray(),
            [Channel.VdsHigh] = low[Channel.VdsLow].ToArray(),
            [Channel.IdHigh] = low[Channel.IdLow].ToArray(),
            [Channel.VgsLow] = low[Channel.VgsHigh].ToArray(),
            [Channel.VdsLow] = low[Channel.VdsHigh].ToArray(),
            [Channel.IdLow] = low[Channel.IdHigh].ToArray(),
            [Channel.Vbus] = low[Channel.Vbus].ToArray(),
        });

        AnalysisResult expected = WaveformAnalysis.Analyse(low, settings);
        AnalysisResult mirrored = WaveformAnalysis.Analyse(high, settings with { Position = DevicePosition.High });

        Assert.Equal(expected.Quantities, mirrored.Quantities);
        Assert.Equal(expected.Train.Edges, mirrored.Train.Edges);
        Assert.Equal(expected.Train.Noise[Channel.VdsLow], mirrored.Train.Noise[Channel.VdsHigh]);
    }

    [Fact]
    public void A_reason_names_the_channel_that_is_missing_on_the_bench()
    {
        Waveform gateOnly = new(0, 1e-9, new Dictionary<Channel, double[]> { [Channel.VdsHigh] = new double[100] });
        AnalysisSettings settings = new() { Position = DevicePosition.High };

        QuantityValue vdsOn = WaveformAnalysis.Analyse(gateOnly, settings).Quantities
            .Single(q => q.Quantity == "vds_on");

        Assert.Null(vdsOn.Value);
        Assert.Equal("vgs_high is not measured", vdsOn.Reason);
    }
}
