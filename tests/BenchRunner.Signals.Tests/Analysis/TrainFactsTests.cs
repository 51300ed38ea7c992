using System.Text.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>Facts of the train against those of the independent extraction (tests/reference/waveforms).</summary>
public sealed class TrainFactsTests
{
    [Theory]
    [InlineData("lv40")]
    [InlineData("hv650soft")]
    [InlineData("hv650snap")]
    [InlineData("saturating")]
    public void Edges_ramp_growth_on_state_and_false_turn_on_are_those_of_the_reference(string scenario)
    {
        Waveform clean = Reference.Waveform($"{scenario}-clean.csv.gz");
        TrainFacts train = WaveformAnalysis.Analyse(clean, Reference.Settings(scenario, measured: false)).Train;
        using JsonDocument reference = Reference.Json($"waveforms/{scenario}-reference.json");
        JsonElement detail = reference.RootElement.GetProperty("clean_csv_detail");
        JsonElement meta = reference.RootElement.GetProperty("truth_detail").GetProperty("meta");
        double bus = reference.RootElement.GetProperty("truth").GetProperty("bus_voltage")
            .GetProperty("levels/window").GetDouble();

        // 0.1 ns is what the clean grid costs against the solver's own points.
        Assert.Equal(Numbers(meta, "edges_vgs_50"), train.Edges.Select(e => e.At), Within(0.1e-9));
        Assert.Equal(Numbers(meta, "edges_departure"), train.Edges.Select(e => e.Departure), Within(0.1e-9));
        Assert.True(train.IsTwoPulses);
        Assert.Equal(detail.GetProperty("ramp_slope_growth").GetDouble(), train.RampGrowth!.Value, 3);
        Assert.Equal(detail.GetProperty("vds_low_over_bus_gate_on").GetDouble(), train.OnStateMaximum!.Value / bus, 4);
        Assert.Equal(
            detail.GetProperty("vgs_high_peak_on2_to_recovery_end").GetDouble(),
            train.FreewheelingGateMaximum!.Value,
            3);
        // The last samples before the departure already carry the gate's displacement current: some 10 µA in the mean.
        Assert.Equal(
            detail.GetProperty("pre_pulse_current").GetDouble(), train.CurrentBeforeOn1!.Value, Within(1e-4));
        Assert.Equal(BaselineSource.BeforeOn1, train.Baseline);
    }

    [Fact]
    public void A_shorted_high_side_shows_in_the_on_state()
    {
        // The reference's README: vds_low is up to 97 % of the bus with the gate on.
        TrainFacts train = WaveformAnalysis.Analyse(
            Reference.Waveform("shorted-clean.csv.gz"), Reference.Settings("shorted", measured: false)).Train;
        Assert.InRange(train.OnStateMaximum!.Value / train.BusBeforeOn1!.Value, 0.9, 1);
    }

    [Fact]
    public void A_gate_whose_10_percent_is_within_its_noise_gives_no_turn_on_delay_and_everything_else()
    {
        // 3 σ of 0.5 V is above 10 % of 12 V.
        Waveform clean = Reference.Waveform("hv650soft-clean.csv.gz");
        AnalysisSettings settings = Reference.Settings("hv650soft", measured: false);
        Random random = new(3);
        Dictionary<Channel, double[]> noisy = clean.Channels.ToDictionary(c => c, c => clean[c].ToArray());
        noisy[Channel.VgsLow] = [.. noisy[Channel.VgsLow].Select(x => x + (0.5 * (Enumerable.Range(0, 12)
            .Sum(_ => random.NextDouble()) - 6)))];
        AnalysisResult result = WaveformAnalysis.Analyse(new Waveform(0, clean.SampleInterval, noisy), settings);
        Assert.True(result.Train.IsTwoPulses);
        Assert.All(
            result.Quantities.Where(q => q.Quantity == "td_on"), q => Assert.Equal("level within the noise", q.Reason));
        Assert.All(
            result.Quantities.Where(q => q.Quantity is "td_off" or "eon" or "eoff"), q => Assert.NotNull(q.Value));
    }

    private static double[] Numbers(JsonElement of, string name) =>
        [.. of.GetProperty(name).EnumerateArray().Select(x => x.GetDouble())];

    private static Func<double, double, bool> Within(double tolerance) =>
        (expected, actual) => Math.Abs(expected - actual) <= tolerance;
}
