using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Comparisons;

/// <summary>Whole waveforms compared, on the simulated ones of tests/reference/waveforms.</summary>
public sealed class WaveformComparisonTests
{
    private static readonly AnalysisSettings _usual = new();

    [Theory]
    [InlineData("lv40")]
    [InlineData("hv650soft")]
    [InlineData("hv650snap")]
    [InlineData("saturating")]
    public void A_waveform_against_itself_has_no_shift_and_no_error(string scenario)
    {
        Waveform waveform = Reference.Waveform($"{scenario}-clean.csv.gz");

        ComparisonResult result = Compare(waveform, _usual, waveform);

        Assert.Equal(0.0, result.Shift);
        Assert.All(result.Channels, one => Assert.Equal(
            (0.0, 0.0, 0.0), (one.Nrmse, one.SpragueGeers?.Combined, one.FeatureSelective?.Global)));
        Assert.All(result.Others, one => Assert.Equal(0.0, one.RelativeError));
        Assert.Equal(8, result.Channels.Count);
    }

    /// <summary>The tolerances are wide: the measured record has 0.5 % noise of full scale and one pole, at 350 MHz
    /// (lv40) or 200 MHz, which delays every channel by 1/(2π f).</summary>
    [Theory]
    [InlineData("lv40", 350e6)]
    [InlineData("hv650soft", 200e6)]
    [InlineData("hv650snap", 200e6)]
    [InlineData("saturating", 200e6)]
    public void A_measured_record_is_near_its_clean_one_and_late_by_the_pole(string scenario, double pole)
    {
        ComparisonResult result = Compare(
            Reference.Waveform($"{scenario}-measured.csv.gz"),
            Reference.Settings(scenario, measured: true),
            Reference.Waveform($"{scenario}-clean.csv.gz"));

        Assert.Equal(1 / (2 * Math.PI * pole), result.Shift!.Value, 0.2e-9);
        Assert.All(result.Channels, one => Assert.InRange(one.Nrmse!.Value, 1e-4, 0.03));
        Assert.All(result.Channels, one => Assert.InRange(one.SpragueGeers!.Value.Combined, 1e-5, 0.02));
        ChannelComparison whole = result.Whole!;
        Assert.Equal(Channel.VdsHigh, whole.Channel);
        Assert.Equal("Excellent", FeatureSelective.Word(whole.FeatureSelective!.Value.Amplitude));
        Assert.All(
            result.Others.Where(one => one.Quantity.StartsWith("vds_high_peak", StringComparison.Ordinal)),
            one => Assert.InRange(one.RelativeError!.Value, -0.04, 0.04));
        Assert.Contains(
            result.Others, one => one is { Quantity: "trr", Definition: "trr/chord-90-25@id_low-iL" });
    }

    [Theory]
    [InlineData(0.0)]
    [InlineData(0.37)]
    [InlineData(-1.81)]
    public void A_record_late_by_a_known_time_on_another_grid_is_found(double late)
    {
        Waveform reference = Reference.Waveform("hv650snap-clean.csv.gz");
        Waveform moved = Correction.Correct(reference, new AnalysisSettings
        {
            Corrections = reference.Channels.ToDictionary(
                channel => channel, _ => new ChannelCorrection(1, null, -late * reference.SampleInterval)),
        });
        Waveform measured = new(
            3e-6 + moved.TimeOrigin + (1001 * moved.SampleInterval),
            2 * moved.SampleInterval,
            moved.Channels.ToDictionary(
                channel => channel,
                channel => (double[])[.. moved[channel].ToArray()[1001..^40].Where((_, i) => i % 2 == 0)]));

        ComparisonResult result = Compare(measured, _usual, reference);

        Assert.Equal(3e-6 + (late * reference.SampleInterval), result.Shift!.Value, 0.02 * reference.SampleInterval);
        Assert.InRange(result.Whole!.Nrmse!.Value, 0, 1e-3);
    }

    [Fact]
    public void A_channel_left_late_shows_its_own_shift()
    {
        Waveform reference = Reference.Waveform("hv650snap-clean.csv.gz");
        AnalysisSettings late = new()
        {
            Corrections = new Dictionary<Channel, ChannelCorrection> { [Channel.IdLow] = new(1, null, -1.3e-9) },
        };

        ComparisonResult result = Compare(reference, late, reference);

        Assert.Equal(0.0, result.Shift);
        Assert.Equal(1.3e-9, result.Channels.Single(one => one.Channel == Channel.IdLow).OwnShift!.Value, 0.02e-9);
        Assert.Equal(0, result.Channels.Single(one => one.Channel == Channel.VdsLow).OwnShift!.Value, 0.02e-9);
    }

    [Fact]
    public void Channels_that_only_one_has_are_left_out_and_what_needs_them_has_a_reason()
    {
        Waveform reference = Reference.Waveform("lv40-clean.csv.gz");
        Waveform part = Only(reference, Channel.VgsLow, Channel.VdsLow, Channel.Vbus);

        ComparisonResult result = Compare(part, _usual, reference, new ScalarName("trr", null));

        Assert.Equal([Channel.VgsLow, Channel.VdsLow, Channel.Vbus], result.Channels.Select(one => one.Channel));
        Assert.Equal(Channel.VdsLow, result.Headline);
        Assert.Equal(0.0, result.Shift);
        Assert.Contains("id_low is not measured", Assert.Single(result.Named).Reason!, StringComparison.Ordinal);
        Assert.Contains("the reference's ringing", result.Window!.Meaning, StringComparison.Ordinal);
    }

    [Fact]
    public void Nothing_in_common_has_a_reason()
    {
        Waveform reference = Reference.Waveform("lv40-clean.csv.gz");

        ComparisonResult result = Compare(
            Only(reference, Channel.VgsLow), _usual, Only(reference, Channel.VdsLow));

        Assert.Empty(result.Channels);
        Assert.Equal((null, null), (result.Shift, result.Headline));
        Assert.Contains("no channel", result.Reason!, StringComparison.Ordinal);
    }

    [Fact]
    public void Without_the_gate_the_whole_records_are_compared()
    {
        Waveform whole = Reference.Waveform("lv40-clean.csv.gz");
        Waveform measured = Only(whole, Channel.VdsHigh);
        Waveform reference = new(
            0, whole.SampleInterval,
            new Dictionary<Channel, double[]> { [Channel.VdsHigh] = whole[Channel.VdsHigh][15000..].ToArray() });

        ComparisonResult result = Compare(measured, _usual, reference);

        Assert.Equal(15000 * whole.SampleInterval, result.Shift!.Value, 0.02 * whole.SampleInterval);
        Assert.Equal(whole.TimeAt(15000), result.Window!.From, 1e-12);
        Assert.Contains("whole", result.Window.Meaning, StringComparison.Ordinal);
        Assert.InRange(result.Whole!.Nrmse!.Value, 0, 1e-9);
    }

    [Fact]
    public void A_clipped_sample_in_the_window_leaves_its_channel_without_errors()
    {
        Waveform reference = Reference.Waveform("hv650soft-clean.csv.gz");
        double[] clipped = reference[Channel.IdLow].ToArray();
        clipped[8630] = double.PositiveInfinity;
        Waveform measured = new(
            reference.TimeOrigin,
            reference.SampleInterval,
            reference.Channels.ToDictionary(
                channel => channel,
                channel => channel == Channel.IdLow ? clipped : reference[channel].ToArray()));

        ComparisonResult result = Compare(measured, _usual, reference);

        Assert.Equal("id_low is clipped", result.Channels.Single(one => one.Channel == Channel.IdLow).Reason);
        Assert.Equal(0.0, result.Whole!.Nrmse);
    }

    [Fact]
    public void A_definition_that_is_asked_for_forms_both_values()
    {
        Waveform reference = Reference.Waveform("hv650soft-clean.csv.gz");

        ComparisonResult result = Compare(
            Only(reference, Channel.VgsLow, Channel.VdsLow, Channel.IdLow, Channel.VdsHigh, Channel.Vbus),
            _usual,
            reference,
            new ScalarName("qrr", "qrr/fall-10"),
            new ScalarName("qrr", "qrr/window-80ns"),
            new ScalarName("qrr", null));

        Assert.Equal(
            ["qrr/fall-10@id_low-iL", "qrr/window-80ns@id_low-iL", "qrr/chord-90-25@id_low-iL"],
            result.Named.Select(one => one.Definition));
        Assert.All(result.Named, one => Assert.Equal(0.0, one.RelativeError));
        Assert.DoesNotContain(result.Others, one => one.Quantity == "qrr");
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(5)]
    [InlineData(40)]
    public void Records_of_a_few_samples_give_reasons(int count)
    {
        Waveform few = new(
            0,
            1e-9,
            new Dictionary<Channel, double[]>
            {
                [Channel.VdsHigh] = [.. Enumerable.Range(0, count).Select(i => i * 0.5)],
            });

        ComparisonResult result = Compare(few, _usual, Reference.Waveform("lv40-clean.csv.gz"));

        Assert.True(result.Reason is not null || result.Whole is { Reason: not null } or { Nrmse: not null });
    }

    private static Waveform Only(Waveform waveform, params Channel[] channels) => new(
        waveform.TimeOrigin,
        waveform.SampleInterval,
        channels.ToDictionary(channel => channel, channel => waveform[channel].ToArray()));

    private static ComparisonResult Compare(
        Waveform measured, AnalysisSettings settings, Waveform reference, params ScalarName[] named) =>
        WaveformComparison.Compare(measured, settings, reference, settings.WithoutCorrections(), named);
}
