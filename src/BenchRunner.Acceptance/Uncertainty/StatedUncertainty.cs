using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Uncertainty;

/// <summary>
/// What a bench file alone says about the uncertainty of a level or peak, before anything was measured.
/// </summary>
public static class StatedUncertainty
{
    private static readonly Dictionary<string, Channel> _levels = new()
    {
        ["vds_on"] = Channel.VdsLow,
        ["vds_peak_off"] = Channel.VdsLow,
        ["vds_overshoot_off"] = Channel.VdsLow,
        ["vds_high_peak_1"] = Channel.VdsHigh,
        ["vds_high_peak_2"] = Channel.VdsHigh,
        ["vds_high_peak_3"] = Channel.VdsHigh,
        ["id_peak_on"] = Channel.IdLow,
        ["i_on"] = Channel.IdLow,
    };

    /// <summary>Standard uncertainty of a value of one channel, from its stated gain and offset: √((u_gain · value)² +
    /// u_offset²).</summary>
    /// <param name="quantity">The quantity.</param>
    /// <param name="value">The value expected, V or A.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <returns>Standard uncertainty, V or A: a lower bound of what a capture will show; null for a quantity that is no
    /// level of one channel, or a channel that is not recorded.</returns>
    public static double? Of(string quantity, double value, Sequence sequence, Bench bench)
    {
        ArgumentNullException.ThrowIfNull(bench);
        if (!_levels.TryGetValue(quantity, out Channel asIfLow))
        {
            return null;
        }

        Channel channel = HalfBridge.Playing(asIfLow, HalfBridge.FiresHigh(sequence));
        if (bench.Channels.FirstOrDefault(setup => setup.Channel == channel) is not { } found)
        {
            return null;
        }

        double gain = found.GainUncertainty * value;
        double offset = found.OffsetUncertainty / found.Gain;
        return Math.Sqrt((gain * gain) + (offset * offset));
    }
}
