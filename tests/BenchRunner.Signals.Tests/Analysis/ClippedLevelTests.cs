using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>What rests on a level, a line or a peak that holds clipped samples has no value either.</summary>
public sealed class ClippedLevelTests
{
    private static readonly Waveform _whole = Reference.Waveform("hv650soft-clean.csv.gz");
    private static readonly AnalysisSettings _settings =
        Reference.Settings("hv650soft", measured: false) with { EveryDefinition = false };

    [Theory]
    [InlineData(Channel.Vbus, 8.5e-6, "bus_voltage", "vbus is clipped",
        "eon eoff tr tf dvdt_on dvdt_off vds_overshoot_off")]
    [InlineData(Channel.IdLow, 9.9e-6, "i_on", "id_low is clipped", "eon didt_on")]
    [InlineData(Channel.IdLow, 4e-6, "i_off", "id_low is clipped", "eoff didt_off ramp_slope ramp_straightness")]
    [InlineData(Channel.VdsLow, 5.5e-6, "vds_on", "vds_low is clipped", "eoff tf td_off dvdt_off")]
    public void A_clipped_sample_takes_what_rests_on_it(
        Channel channel, double at, string quantity, string reason, string dependents)
    {
        AnalysisResult sound = WaveformAnalysis.Analyse(_whole, _settings);
        AnalysisResult clipped = Clip(channel, at, 1);

        Assert.Equal(reason, Find(clipped, quantity).Reason);
        foreach (string dependent in dependents.Split(' '))
        {
            Assert.NotNull(Find(sound, dependent).Value);
            Assert.EndsWith(reason, Find(clipped, dependent).Reason, StringComparison.Ordinal);
        }
    }

    [Fact]
    public void Without_the_peak_of_recovery_its_fall_has_no_slope()
    {
        AnalysisResult sound = WaveformAnalysis.Analyse(_whole, _settings);
        int peak = (int)Math.Round((Find(sound, "irm").To!.Value - _whole.TimeOrigin) / _whole.SampleInterval);

        foreach (Channel channel in (Channel[])[Channel.IdHigh, Channel.IdLow])
        {
            AnalysisResult clipped = Clip(channel, _whole.TimeAt(peak - 2), 4, channel == Channel.IdLow);
            Assert.NotNull(Find(sound, "dirr_dt").Value);
            Assert.Null(Find(clipped, "irm").Value);
            Assert.Null(Find(clipped, "dirr_dt").Value);
        }
    }

    private static AnalysisResult Clip(Channel channel, double at, int count, bool byLoadLine = false)
    {
        int from = (int)Math.Round((at - _whole.TimeOrigin) / _whole.SampleInterval);
        Dictionary<Channel, double[]> channels = _whole.Channels
            .Where(one => !byLoadLine || one != Channel.IdHigh)
            .ToDictionary(one => one, one => _whole[one].ToArray());
        channels[channel].AsSpan(from, count).Fill(double.PositiveInfinity);
        return WaveformAnalysis.Analyse(
            new Waveform(_whole.TimeOrigin, _whole.SampleInterval, channels), _settings);
    }

    private static QuantityValue Find(AnalysisResult result, string quantity) =>
        result.Quantities.Single(value => value.Quantity == quantity);
}
