using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>An offset that the corrections take off changes nothing: a stated one of any channel, and one that nobody
/// states of a current.</summary>
public sealed class OffsetTests
{
    private static readonly Waveform _clean = Reference.Waveform("hv650soft-clean.csv.gz");
    private static readonly AnalysisSettings _settings = Reference.Settings("hv650soft", measured: false);
    private static readonly Channel[] _currents = [Channel.IdLow, Channel.IdHigh, Channel.ILoad];

    [Fact]
    public void A_stated_offset_of_any_channel_changes_nothing()
    {
        AnalysisSettings none = With(_clean.Channels.ToDictionary(c => c, _ => 0.0));
        AnalysisResult expected = WaveformAnalysis.Analyse(_clean, none);
        Gen.Double[-20, 20].Array[8].Sample(
            offsets =>
            {
                Dictionary<Channel, double> stated = _clean.Channels.ToDictionary(c => c, c => offsets[(int)c]);
                Same(expected, WaveformAnalysis.Analyse(Shifted(_clean, stated), With(stated)));
            },
            iter: 10);
    }

    [Fact]
    public void An_offset_of_a_current_that_nobody_states_changes_nothing()
    {
        AnalysisResult expected = WaveformAnalysis.Analyse(_clean, _settings);
        Gen.Double[-20, 20].Array[3].Sample(
            offsets =>
            {
                Dictionary<Channel, double> unstated = _currents.Zip(offsets).ToDictionary(p => p.First, p => p.Second);
                Same(expected, WaveformAnalysis.Analyse(Shifted(_clean, unstated), _settings));
            },
            iter: 10);
    }

    [Theory]
    [InlineData(Channel.IdLow)]
    [InlineData(Channel.IdHigh)]
    [InlineData(Channel.ILoad)]
    public void One_stated_current_leaves_the_rest_of_the_others_to_be_found(Channel stated)
    {
        AnalysisSettings settings = With(new() { [stated] = 0 });
        AnalysisResult expected = WaveformAnalysis.Analyse(_clean, settings);
        Dictionary<Channel, double> others = _currents.Where(c => c != stated).ToDictionary(c => c, _ => 3.0);
        Same(expected, WaveformAnalysis.Analyse(Shifted(_clean, others), settings));
    }

    [Fact]
    public void A_record_without_on1_has_the_switchs_rest_from_the_gap_and_says_so()
    {
        Waveform cut = Cut(_clean, 2000);
        AnalysisResult expected = WaveformAnalysis.Analyse(cut, _settings);
        AnalysisResult shifted = WaveformAnalysis.Analyse(Shifted(cut, new() { [Channel.IdLow] = -7 }), _settings);
        Same(expected, shifted);
        Assert.Equal(BaselineSource.Gap, shifted.Train.Baseline);
        Assert.Equal(
            BaselineSource.Stated, WaveformAnalysis.Analyse(cut, With(new() { [Channel.IdLow] = 0 })).Train.Baseline);
    }

    private static AnalysisSettings With(Dictionary<Channel, double> offsets) => _settings with
    {
        Corrections = offsets.ToDictionary(p => p.Key, p => new ChannelCorrection(Offset: p.Value)),
    };

    private static Waveform Shifted(Waveform waveform, Dictionary<Channel, double> offsets) =>
        new(waveform.TimeOrigin, waveform.SampleInterval, waveform.Channels.ToDictionary(
            c => c, c => waveform[c].ToArray().Select(x => x + offsets.GetValueOrDefault(c)).ToArray()));

    private static Waveform Cut(Waveform waveform, int first) => new(
        waveform.TimeAt(first),
        waveform.SampleInterval,
        waveform.Channels.ToDictionary(c => c, c => waveform[c][first..].ToArray()));

    private static void Same(AnalysisResult expected, AnalysisResult actual)
    {
        Assert.Equal(expected.Quantities.Count, actual.Quantities.Count);
        foreach ((QuantityValue was, QuantityValue now) in expected.Quantities.Zip(actual.Quantities))
        {
            Assert.Equal((was.Quantity, was.Definition, was.Reason), (now.Quantity, now.Definition, now.Reason));
            if (was.Value is { } value)
            {
                // The offset costs some last bits of each sample: 1e-14 of 400 V, of a mean of some mV 1e-9.
                Assert.True(
                    Math.Abs(value - now.Value!.Value) <= 1e-7 * Math.Abs(value),
                    $"{was.Quantity} {was.Definition}: {value} {now.Value}");
                Assert.Equal(was.From!.Value, now.From!.Value, 1e-15);
                Assert.Equal(was.To!.Value, now.To!.Value, 1e-15);
            }
        }
    }
}
