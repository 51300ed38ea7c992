using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Comparisons;

public sealed class ChannelComparisonTests
{
    private static readonly double[] _wave =
        [.. Enumerable.Range(0, 200).Select(i => 40 * Math.Sin(2 * Math.PI * i / 50))];

    /// <summary>Closed form: the rms of (s − 1) A sin is |s − 1| A/√2, the span 2 A.</summary>
    [Fact]
    public void The_nrmse_of_a_scaled_sine_is_its_scale_error_over_two_roots_of_two()
    {
        double[] measured = [.. _wave.Select(x => 1.1 * x)];

        double nrmse = ChannelComparison.Form(Channel.VdsHigh, measured, _wave, null).Nrmse!.Value;

        // The largest sample lies 1.8 degrees beside the crest.
        Assert.Equal(0.1 / (2 * Math.Sqrt(2)), nrmse * Math.Cos(Math.PI / 100), 1e-4);
    }

    [Fact]
    public void An_offset_is_its_part_of_the_span()
    {
        double[] measured = [.. _wave.Select(x => x + 4)];
        double span = _wave.Max() - _wave.Min();

        Assert.Equal(4 / span, ChannelComparison.Form(Channel.VdsHigh, measured, _wave, null).Nrmse!.Value, 1e-12);
    }

    [Fact]
    public void A_waveform_against_itself_has_no_error()
    {
        ChannelComparison one = ChannelComparison.Form(Channel.VdsHigh, _wave, _wave, null);

        Assert.Equal(
            (0.0, 0.0, 0.0), (one.Nrmse, one.SpragueGeers!.Value.Combined, one.FeatureSelective!.Value.Global));
    }

    [Fact]
    public void A_flat_reference_or_too_few_samples_have_a_reason()
    {
        Assert.Contains(
            "flat", ChannelComparison.Form(Channel.Vbus, _wave, new double[200], null).Reason!,
            StringComparison.Ordinal);
        Assert.Contains(
            "fewer", ChannelComparison.Form(Channel.Vbus, _wave.AsSpan(..20), _wave.AsSpan(..20), null).Reason!,
            StringComparison.Ordinal);
    }
}
