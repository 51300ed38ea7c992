using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>A record may hold a part of the train: what can be formed is, the rest has its reason.</summary>
public sealed class PartialRecordTests
{
    private static readonly Waveform _whole = Reference.Waveform("hv650soft-clean.csv.gz");
    private static readonly AnalysisSettings _settings = Reference.Settings("hv650soft", measured: false);
    private static readonly AnalysisResult _expected = WaveformAnalysis.Analyse(_whole, _settings);

    [Fact]
    public void A_whole_record_has_its_four_edges_where_the_driver_put_them()
    {
        // Edges of the driver in the simulated circuit: 0.6, 5.6, 8.6 and 10.2 µs; the gate follows within 20 ns.
        TrainFacts train = _expected.Train;
        Assert.True(train.IsTwoPulses);
        Assert.Equal(4, train.Edges.Count);
        Assert.InRange(train.On1!.Value.At, 0.6e-6, 0.62e-6);
        Assert.InRange(train.Off1!.Value.At, 5.6e-6, 5.62e-6);
        Assert.InRange(train.On2!.Value.At, 8.6e-6, 8.62e-6);
        Assert.InRange(train.Off2!.Value.At, 10.2e-6, 10.22e-6);
        Assert.All(train.Edges, e => Assert.True(e.Departure <= e.At));
    }

    [Fact]
    public void A_record_that_begins_inside_the_first_pulse_keeps_everything_but_what_on1_gives()
    {
        AnalysisResult cut = Cut(2e-6, 10.8e-6);
        Assert.Null(cut.Train.On1);
        Assert.NotNull(cut.Train.Off1);
        Assert.False(cut.Train.IsTwoPulses);
        Assert.Equal("on1 is outside the record", Find(cut, "bus_droop").Reason);
        foreach (string quantity in (string[])["eon", "eoff", "trr", "qrr", "irm", "i_off", "i_on", "dvdt_on"])
        {
            Near(Find(_expected, quantity), Find(cut, quantity), 0.005);
        }

        // The last tenth of a shorter pulse lies later, where more current flows.
        Near(Find(_expected, "vds_on"), Find(cut, "vds_on"), 0.02);
    }

    [Fact]
    public void A_record_that_ends_inside_the_second_pulse_still_says_what_the_second_turn_on_was()
    {
        AnalysisResult cut = Cut(0, 9.6e-6);
        Assert.NotNull(cut.Train.On2);
        Assert.Null(cut.Train.Off2);
        foreach (string quantity in (string[])["eon", "eoff", "trr", "qrr", "irm", "i_off", "i_on"])
        {
            Near(Find(_expected, quantity), Find(cut, quantity), 0.02);
        }
    }

    [Theory]
    [InlineData(Channel.ILoad)]
    [InlineData(Channel.VdsHigh)]
    public void A_record_that_ends_amid_the_second_turn_on_gives_true_values_or_reasons(Channel missing)
    {
        // The second turn-on is at 8.6 µs; its ringing is over 0.3 µs later. A channel is left out so that the ringing
        // is not known either.
        int given = 0;
        for (double end = 8.62e-6; end < 9.8e-6; end += end < 9e-6 ? 7e-9 : 100e-9)
        {
            AnalysisResult cut = Cut(0, end, missing);
            foreach (QuantityValue edge in new[] { "tr", "dvdt_on" }.Select(quantity => Find(cut, quantity)))
            {
                if (edge.Value is not null)
                {
                    Near(Find(_expected, edge.Quantity), edge, 0.05);
                }
            }

            QuantityValue current = Find(cut, "i_on");
            if (current.Value is not null)
            {
                given++;
                Near(Find(_expected, "i_on"), current, 0.02);
            }
            else
            {
                Assert.True(
                    current.Reason is "on state: the record ends while vds falls" or "the second pulse ends before ringing and recovery are over"
                        or "the record ends before the current follows the load's ramp",
                    current.Reason);
            }
        }

        Assert.InRange(given, 8, 60);
    }

    [Fact]
    public void A_turn_off_alone_is_off1()
    {
        AnalysisResult cut = Cut(4e-6, 7e-6);
        Assert.NotNull(cut.Train.Off1);
        Assert.Null(cut.Train.On2);
        Assert.Equal("on2 is outside the record", Find(cut, "eon").Reason);
        Near(Find(_expected, "vds_on"), Find(cut, "vds_on"), 0.05);
    }

    [Fact]
    public void A_pulse_into_a_load_that_carries_current_is_the_second_one()
    {
        AnalysisResult cut = Cut(7e-6, 10.8e-6);
        Assert.Null(cut.Train.Off1);
        Assert.NotNull(cut.Train.On2);
        Assert.NotNull(cut.Train.Off2);
        Assert.Equal("off1 is outside the record", Find(cut, "eoff").Reason);
        Near(Find(_expected, "eon"), Find(cut, "eon"), 0.01);
    }

    [Fact]
    public void A_pulse_into_a_load_without_current_is_the_first_one()
    {
        AnalysisResult cut = Cut(0, 7e-6);
        Assert.NotNull(cut.Train.On1);
        Assert.NotNull(cut.Train.Off1);
        Assert.Null(cut.Train.On2);
    }

    [Theory]
    [InlineData(Channel.VgsLow, "eon", "vgs_low is not measured")]
    [InlineData(Channel.VdsLow, "eon", "vds_low is not measured")]
    [InlineData(Channel.IdLow, "i_off", "id_low is not measured")]
    [InlineData(Channel.VdsHigh, "vds_high_peak_1", "vds_high is not measured")]
    public void A_channel_that_is_missing_is_named(Channel missing, string quantity, string reason)
    {
        Dictionary<Channel, double[]> channels = _whole.Channels.Where(c => c != missing)
            .ToDictionary(c => c, c => _whole[c].ToArray());
        AnalysisResult result = WaveformAnalysis.Analyse(new Waveform(0, _whole.SampleInterval, channels), _settings);
        Assert.Equal(reason, Find(result, quantity).Reason);
    }

    [Fact]
    public void Without_vbus_and_forward_voltage_the_bus_has_a_reason_and_with_it_a_value()
    {
        Dictionary<Channel, double[]> channels = _whole.Channels.Where(c => c != Channel.Vbus)
            .ToDictionary(c => c, c => _whole[c].ToArray());
        Waveform waveform = new(0, _whole.SampleInterval, channels);
        AnalysisSettings settings = _settings with { EveryDefinition = false };

        QuantityValue stated = Find(WaveformAnalysis.Analyse(waveform, settings), "bus_voltage");
        QuantityValue bare = Find(
            WaveformAnalysis.Analyse(waveform, settings with { ForwardVoltage = null }), "bus_voltage");

        Assert.Equal("levels/window-vds", stated.Definition);
        Near(Find(_expected, "bus_voltage"), stated, 0.001);
        Assert.Equal("vbus is not measured and the diode's forward voltage is not stated", bare.Reason);
    }

    private static AnalysisResult Cut(double from, double to, Channel? missing = null)
    {
        int start = (int)(from / _whole.SampleInterval);
        int count = Math.Min((int)(to / _whole.SampleInterval), _whole.Count) - start;
        Dictionary<Channel, double[]> channels = _whole.Channels.Where(c => c != missing)
            .ToDictionary(c => c, c => _whole[c].Slice(start, count).ToArray());
        return WaveformAnalysis.Analyse(new Waveform(from, _whole.SampleInterval, channels), _settings);
    }

    private static QuantityValue Find(AnalysisResult result, string quantity) =>
        result.Quantities.First(q => q.Quantity == quantity);

    private static void Near(QuantityValue expected, QuantityValue actual, double relative)
    {
        Assert.True(actual.Value is not null, $"{actual.Quantity}: {actual.Reason}");
        Assert.InRange(actual.Value.Value / expected.Value!.Value, 1 - relative, 1 + relative);
    }
}
