using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Corrections;

/// <summary>The skew between current and voltage from the dip at turn-on, on simulated records whose skew is stated
/// (tests/reference/waveforms).</summary>
public sealed class SkewFromDipTests(ITestOutputHelper output)
{
    /// <summary>True skew: hv650snap-measured.json; loop inductance that vds sees: 24.1 nH, by the deck.</summary>
    [Fact]
    public void The_skew_of_a_measured_like_record_is_found_within_a_third_of_a_sample()
    {
        const double truth = 4.6e-9;
        Waveform record = Reference.Waveform("hv650snap-measured.csv.gz");
        AnalysisSettings known = Reference.Settings("hv650snap", measured: true);
        Dictionary<Channel, ChannelCorrection> corrections = new(known.Corrections);
        corrections[Channel.IdLow] = corrections[Channel.IdLow] with { Skew = 0 };

        SkewEstimate found = SkewFromDip.Estimate(record, known with { Corrections = corrections });

        output.WriteLine(found.ToString());
        Assert.Equal(truth, found.Skew!.Value, 0.3 * record.SampleInterval);
        Assert.InRange(found.StandardUncertainty!.Value, 0.05e-9, 0.5e-9);
        Assert.Equal(24.1e-9, found.LoopInductance!.Value, 0.15 * 24.1e-9);
    }

    [Theory]
    [InlineData("hv650soft")]
    [InlineData("hv650snap")]
    [InlineData("saturating")]
    public void Without_noise_the_skew_is_within_its_uncertainty_and_a_third_of_a_sample(string scenario)
    {
        Waveform clean = Reference.Waveform($"{scenario}-clean.csv.gz");
        AnalysisSettings late = Reference.Settings(scenario, measured: false) with
        {
            Corrections = new Dictionary<Channel, ChannelCorrection> { [Channel.IdLow] = new(1, null, -2.3e-9) },
        };

        SkewEstimate found = SkewFromDip.Estimate(clean, late);

        output.WriteLine(found.ToString());
        Assert.Equal(2.3e-9, found.Skew!.Value, 0.3 * clean.SampleInterval);
        Assert.Equal(2.3e-9, found.Skew.Value, 2 * found.StandardUncertainty!.Value);
    }

    /// <summary>200 draws of the recording chain; a draw without an answer counts as outside.</summary>
    [Theory]
    [Trait("kind", "slow")]
    [InlineData("hv650soft")]
    [InlineData("hv650snap")]
    [InlineData("saturating")]
    public void Twice_the_stated_uncertainty_holds_95_percent_of_the_draws(string scenario) =>
        new SkewDraw(scenario, Channel.IdLow).Holds(SkewFromDip.Estimate, 4.6, output);

    [Fact]
    public void Without_the_current_or_without_on2_there_is_a_reason()
    {
        Waveform whole = Reference.Waveform("hv650snap-clean.csv.gz");
        AnalysisSettings settings = Reference.Settings("hv650snap", measured: false);

        Assert.Contains("id_low", Estimate(SkewDraw.Only(whole, whole.Count, Channel.VgsLow, Channel.VdsLow)).Reason!,
            StringComparison.Ordinal);
        Assert.NotNull(Estimate(SkewDraw.Only(whole, whole.Count / 2, [.. whole.Channels])).Reason);
        Assert.NotNull(Estimate(SkewDraw.Only(whole, 0, [.. whole.Channels])).Reason);

        SkewEstimate Estimate(Waveform waveform) => SkewFromDip.Estimate(waveform, settings);
    }

    [Fact]
    public void A_shorted_high_side_has_a_reason_or_a_wide_uncertainty()
    {
        SkewEstimate found = SkewFromDip.Estimate(
            Reference.Waveform("shorted-clean.csv.gz"), Reference.Settings("shorted", measured: false));

        output.WriteLine(found.ToString());
        Assert.True(found.Reason is not null || Math.Abs(found.Skew!.Value) <= 2 * found.StandardUncertainty!.Value);
    }
}
