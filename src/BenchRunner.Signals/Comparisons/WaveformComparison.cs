using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>A measured waveform held against a reference: aligned, then sample by sample and quantity by
/// quantity.</summary>
/// <remarks>
/// Pure. The reference is interpolated onto the measured record's grid (six points), not filtered: what it holds and
/// the measured record's probes cannot show is a difference.
/// </remarks>
public static class WaveformComparison
{
    private const int OwnReach = 12;

    // The interpolation spreads a clipped sample over as many neighbours.
    private const int Spread = 6;

    /// <summary>Compares two waveforms.</summary>
    /// <param name="measured">The measured record as it came; an infinity or NaN is a clipped sample.</param>
    /// <param name="measuredSettings">What is taken as given of it; kind and definitions hold for both.</param>
    /// <param name="reference">The reference; may have another sample interval, origin, length, other channels.</param>
    /// <param name="referenceSettings">What is taken as given of it.</param>
    /// <param name="named">Quantities that the result must hold.</param>
    /// <returns>The comparison; whatever could not be formed has a reason.</returns>
    /// <exception cref="ArgumentException">A stated correction cannot be undone, or a quantity is not
    /// known.</exception>
    /// <remarks>
    /// The window reaches from on2's departure to the end of the ringing, both in the measured record (where it does
    /// not ring: in the reference; where neither does: to off2, or the record's end), cut to what both hold. Where on2
    /// is not in both, it is the whole measured record. The shift maximises the cross-correlation of the headline
    /// channel over the window, and is one for all channels.
    /// </remarks>
    public static ComparisonResult Compare(
        Waveform measured,
        AnalysisSettings measuredSettings,
        Waveform reference,
        AnalysisSettings referenceSettings,
        IReadOnlyList<ScalarName> named)
    {
        ArgumentNullException.ThrowIfNull(measured);
        ArgumentNullException.ThrowIfNull(measuredSettings);
        ArgumentNullException.ThrowIfNull(reference);
        ArgumentNullException.ThrowIfNull(referenceSettings);
        ArgumentNullException.ThrowIfNull(named);
        ScalarSet scalars = new(measured, measuredSettings, reference, referenceSettings);
        ScalarComparison[] found = [.. named.Select(scalars.Find)];
        Channel[] common = [.. measured.Channels.Where(reference.Has)];
        Channel? headline = Headline(common, measuredSettings);
        ComparisonResult result = new([], headline, null, null, null, found, scalars.Others(found));
        if (headline is not { } aligned)
        {
            return result with { Reason = "no channel is in both" };
        }

        Stretch stretch = Stretch.Find(measured, scalars.Measured, reference, scalars.Reference);
        Dictionary<Channel, string> clipped = [];
        foreach (Channel channel in common)
        {
            if (Clipped(measured, measuredSettings, reference, referenceSettings, channel, stretch) is { } why)
            {
                clipped[channel] = why;
            }
        }

        string? reason = clipped.GetValueOrDefault(aligned);
        Alignment? alignment = reason is null ? Align(scalars, aligned, stretch) : null;
        if (alignment is not { } best)
        {
            reason ??= $"the cross-correlation of {aligned.Name()} has no maximum within "
                + $"{stretch.FarthestReach} samples of where it is expected";
            return result with
            {
                Reason = reason,
                Channels = [.. common.Select(channel => ChannelComparison.None(
                    channel, clipped.GetValueOrDefault(channel) ?? "the two are not aligned"))],
            };
        }

        (int first, int end) = Alignment.Covered(
            reference.Count, stretch.Start - (best.Shift * stretch.Step), stretch.Step, stretch.Count);
        return result with
        {
            Shift = best.Shift * measured.SampleInterval,
            Window = new ComparisonWindow(
                measured.TimeAt(stretch.From + first),
                measured.TimeAt(stretch.From + end - 1),
                stretch.Meaning + (end - first < stretch.Count ? ", cut to what the reference holds" : "")),
            Channels = [.. common.Select(channel => clipped.TryGetValue(channel, out string? why)
                ? ChannelComparison.None(channel, why)
                : Form(scalars, channel, stretch, best.Shift, first, end))],
        };
    }

    private static Channel? Headline(Channel[] common, AnalysisSettings settings)
    {
        (Channel freewheeling, Channel firing) = settings.Position == DevicePosition.High
            ? (Channel.VdsLow, Channel.VdsHigh)
            : (Channel.VdsHigh, Channel.VdsLow);
        return common.Contains(freewheeling) ? freewheeling
            : common.Contains(firing) ? firing
            : common.Length > 0 ? common[0]
            : null;
    }

    private static Alignment? Align(ScalarSet scalars, Channel channel, Stretch stretch)
    {
        ReadOnlySpan<double> measured = scalars.MeasuredTraces[channel].Slice(stretch.From, stretch.Count);
        ReadOnlySpan<double> reference = scalars.ReferenceTraces[channel];
        double? guess = stretch.Guess
            ?? Alignment.Guess(measured, reference, stretch.Start, stretch.Step);
        Alignment? found = null;
        bool isDone = guess is null;
        for (int reach = stretch.Reach; !isDone; reach = Math.Min(2 * reach, stretch.FarthestReach))
        {
            found = Alignment.Find(measured, reference, stretch.Start, stretch.Step, guess!.Value, reach);
            isDone = found is not null || reach >= stretch.FarthestReach;
        }

        return found;
    }

    private static ChannelComparison Form(
        ScalarSet scalars, Channel channel, Stretch stretch, double shift, int first, int end)
    {
        ReadOnlySpan<double> measured = scalars.MeasuredTraces[channel].Slice(stretch.From, stretch.Count);
        ReadOnlySpan<double> reference = scalars.ReferenceTraces[channel];
        double[] moved = new double[stretch.Count];
        Alignment.Resample(reference, stretch.Start - (shift * stretch.Step), stretch.Step, moved);
        Alignment? own = Alignment.Find(measured, reference, stretch.Start, stretch.Step, shift, OwnReach);
        double? further = own is { Correlation: > 0.9 } found
            ? (found.Shift - shift) * scalars.MeasuredTraces.SampleInterval
            : null;
        return ChannelComparison.Form(channel, measured[first..end], moved.AsSpan(first, end - first), further);
    }

    private static string? Clipped(
        Waveform measured,
        AnalysisSettings measuredSettings,
        Waveform reference,
        AnalysisSettings referenceSettings,
        Channel channel,
        Stretch stretch)
    {
        if (IsClipped(measured, measuredSettings, channel, stretch.From, stretch.From + stretch.Count - 1))
        {
            return $"{channel.Name()} is clipped";
        }

        double from = stretch.Guess is { } guess ? stretch.Start - ((guess + stretch.Reach) * stretch.Step) : 0;
        double to = stretch.Guess is null
            ? reference.Count - 1
            : from + ((stretch.Count + (2 * stretch.Reach)) * stretch.Step);
        return IsClipped(reference, referenceSettings, channel, from, to)
            ? $"{channel.Name()} of the reference is clipped"
            : null;
    }

    private static bool IsClipped(
        Waveform waveform, AnalysisSettings settings, Channel channel, double from, double to)
    {
        double late = (settings.Corrections.GetValueOrDefault(channel)?.Skew ?? 0) / waveform.SampleInterval;
        int first = (int)Math.Clamp(from + late - Spread, 0, waveform.Count);
        int last = (int)Math.Clamp(to + late + Spread, first, waveform.Count);
        foreach (double sample in waveform[channel][first..last])
        {
            if (!double.IsFinite(sample))
            {
                return true;
            }
        }

        return false;
    }
}
