using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Corrections;

/// <summary>The skew between gate and drain from what the drain displaces in the gate, on simulated records whose skew
/// is stated (tests/reference/waveforms).</summary>
public sealed class SkewFromGateTests(ITestOutputHelper output)
{
    /// <summary>True skew: hv650snap-measured.json, hv650soft-measured.json, saturating-measured.json.</summary>
    [Theory]
    [InlineData("hv650snap")]
    [InlineData("hv650soft")]
    [InlineData("saturating")]
    public void The_skew_of_a_measured_like_record_is_found_within_a_third_of_a_sample(string scenario)
    {
        const double truth = 1.2e-9;
        Waveform record = Reference.Waveform($"{scenario}-measured.csv.gz");

        SkewEstimate found = SkewFromGate.Estimate(record, Unstated(scenario));

        output.WriteLine(found.ToString());
        Assert.Equal(truth, found.Skew!.Value, 0.3 * record.SampleInterval);
        Assert.InRange(found.StandardUncertainty!.Value, 0.05e-9, 0.5e-9);
    }

    [Theory]
    [InlineData("hv650snap")]
    [InlineData("hv650soft")]
    [InlineData("saturating")]
    public void Without_noise_there_is_no_skew_within_its_uncertainty_and_a_tenth_of_a_sample(string scenario)
    {
        Waveform clean = Reference.Waveform($"{scenario}-clean.csv.gz");

        SkewEstimate found = SkewFromGate.Estimate(clean, Reference.Settings(scenario, measured: false));

        output.WriteLine(found.ToString());
        Assert.Equal(0, found.Skew!.Value, 0.1 * clean.SampleInterval);
        Assert.Equal(0, found.Skew.Value, found.StandardUncertainty!.Value);
    }

    /// <summary>A ring's phase alone would be wrong by a period: 8.6 ns in hv650snap, 10.5 ns in the others.</summary>
    [Theory]
    [InlineData("hv650snap", 7.1)]
    [InlineData("hv650snap", -6.2)]
    [InlineData("hv650soft", 7.1)]
    [InlineData("hv650soft", -6.2)]
    [InlineData("saturating", 5.6)]
    [InlineData("saturating", -6.2)]
    public void A_skew_beyond_half_a_period_is_told_in_the_right_period_or_not_at_all(string scenario, double samples)
    {
        SkewDraw draw = new(scenario, Channel.VgsLow);
        double truth = samples * draw.Interval;
        int found = 0;
        for (int seed = SkewDraw.FirstSeed; seed < SkewDraw.FirstSeed + 10; seed++)
        {
            SkewEstimate one = SkewFromGate.Estimate(draw.Of(seed, truth), draw.Settings);
            output.WriteLine($"seed {seed}: {one}");
            found += one.Skew is null ? 0 : 1;
            Assert.Equal(truth, one.Skew ?? truth, 4 * (one.StandardUncertainty ?? 1));
        }

        Assert.InRange(found, 5, 10);
    }

    /// <summary>200 draws of the recording chain; a draw without an answer counts as outside.</summary>
    [Theory]
    [Trait("kind", "slow")]
    [InlineData("hv650snap")]
    [InlineData("hv650soft")]
    [InlineData("saturating")]
    public void Twice_the_stated_uncertainty_holds_95_percent_of_the_draws(string scenario) =>
        new SkewDraw(scenario, Channel.VgsLow).Holds(SkewFromGate.Estimate, 1.2, output);

    /// <summary>Its gate rings by less than its noise and does not jump at turn-on: a gate resistor of 33 Ohm.</summary>
    [Fact]
    public void Where_the_gate_does_not_answer_at_turn_on_there_is_a_reason() =>
        Assert.Contains(
            "turn-on",
            SkewFromGate.Estimate(Reference.Waveform("lv40-measured.csv.gz"), Unstated("lv40")).Reason!,
            StringComparison.Ordinal);

    [Fact]
    public void Without_the_gate_or_on2_or_a_diode_that_lets_the_drain_ring_there_is_a_reason()
    {
        Waveform whole = Reference.Waveform("hv650snap-clean.csv.gz");
        AnalysisSettings settings = Reference.Settings("hv650snap", measured: false);

        Assert.Contains("vgs_low", Estimate(SkewDraw.Only(whole, whole.Count, Channel.VdsLow, Channel.Vbus)).Reason!,
            StringComparison.Ordinal);
        Assert.NotNull(Estimate(SkewDraw.Only(whole, whole.Count / 2, [.. whole.Channels])).Reason);
        Assert.NotNull(Estimate(SkewDraw.Only(whole, 0, [.. whole.Channels])).Reason);
        Assert.NotNull(SkewFromGate.Estimate(
            Reference.Waveform("shorted-clean.csv.gz"), Reference.Settings("shorted", measured: false)).Reason);

        SkewEstimate Estimate(Waveform waveform) => SkewFromGate.Estimate(waveform, settings);
    }

    [Theory]
    [InlineData(Channel.VdsLow, double.NaN)]
    [InlineData(Channel.VgsLow, double.PositiveInfinity)]
    [InlineData(Channel.VdsLow, 0)]
    [InlineData(Channel.VgsLow, 0)]
    public void A_channel_that_is_clipped_or_dead_in_the_gap_has_a_reason(Channel channel, double value)
    {
        Waveform whole = Reference.Waveform("hv650soft-clean.csv.gz");
        Dictionary<Channel, double[]> broken = whole.Channels.ToDictionary(one => one, one => whole[one].ToArray());
        broken[channel].AsSpan(5640, 2000).Fill(value);

        SkewEstimate found = SkewFromGate.Estimate(
            new Waveform(whole.TimeOrigin, whole.SampleInterval, broken),
            Reference.Settings("hv650soft", measured: false));

        Assert.Null(found.Skew);
        Assert.NotNull(found.Reason);
    }

    /// <summary>Records of another simulation at 2 ns a sample, whose voltages are not skewed (tests/reference/ugly).
    /// </summary>
    [Theory]
    [InlineData("below-zero")]
    [InlineData("ringing-load")]
    public void An_ugly_record_without_skew_has_none_within_its_uncertainty(string record)
    {
        Waveform waveform = Reference.Waveform(Path.Combine("..", "ugly", $"{record}.csv.gz"));

        SkewEstimate found = SkewFromGate.Estimate(waveform, new AnalysisSettings());

        output.WriteLine(found.ToString());
        Assert.Equal(0, found.Skew!.Value, 2 * found.StandardUncertainty!.Value);
        Assert.InRange(found.StandardUncertainty.Value, 0, waveform.SampleInterval);
    }

    private static AnalysisSettings Unstated(string scenario)
    {
        AnalysisSettings known = Reference.Settings(scenario, measured: true);
        Dictionary<Channel, ChannelCorrection> corrections = new(known.Corrections);
        corrections[Channel.VgsLow] = corrections[Channel.VgsLow] with { Skew = 0 };
        return known with { Corrections = corrections };
    }
}
