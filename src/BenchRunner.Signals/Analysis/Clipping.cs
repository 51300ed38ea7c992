using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>What is known of a record before anything is corrected: its smallest steps, and its samples that are not
/// finite (clipped), which are bridged by straight lines so that nothing behind here meets one.</summary>
internal sealed class Clipping
{
    private readonly int[]?[] _clipped = new int[]?[ChannelNames.All.Count];
    private readonly double[] _step = new double[ChannelNames.All.Count];
    private readonly double[] _late = new double[ChannelNames.All.Count];

    /// <summary>Looks a record over.</summary>
    public Clipping(Waveform waveform, AnalysisSettings settings)
    {
        foreach (Channel channel in ChannelNames.All)
        {
            if (!waveform.Has(channel))
            {
                continue;
            }

            settings.Corrections.TryGetValue(channel, out ChannelCorrection? correction);
            double step = waveform.Step(channel) > 0 ? waveform.Step(channel) : SmallestStep.OfValues(waveform[channel]);
            _step[(int)channel] = step / Math.Abs(correction?.Gain ?? 1);
            _late[(int)channel] = (correction?.Skew ?? 0) / waveform.SampleInterval;
        }
    }

    /// <summary>The waveform with every sample that is not finite bridged, and remembered as clipped.</summary>
    /// <param name="waveform">The record as it came, or corrected: a correction can overflow.</param>
    /// <param name="isCorrected">Whether its positions are corrected ones.</param>
    public Waveform Bridge(Waveform waveform, bool isCorrected)
    {
        Dictionary<Channel, ChannelSamples> bridged = [];
        foreach (Channel channel in waveform.Channels)
        {
            ChannelSamples samples = waveform.At(channel);
            if (!samples.HasCodes && !Finite.All(samples.Values))
            {
                double late = isCorrected ? _late[(int)channel] : 0;
                bridged[channel] = samples.Filtered((from, to) => Bridge(channel, from, to, late));
            }
        }

        return waveform.With(bridged);
    }

    /// <summary>Smallest step of a channel after correction, V or A.</summary>
    public double Step(Channel channel) => _step[(int)channel];

    /// <summary>Whether an interval, in corrected positions, holds a sample that was not finite.</summary>
    public bool Holds(Channel channel, double from, double to)
    {
        if (_clipped[(int)channel] is not { } clipped)
        {
            return false;
        }

        double late = _late[(int)channel];
        int first = Array.BinarySearch(clipped, (int)Math.Clamp(Math.Floor(from + late), 0, int.MaxValue));
        first = first < 0 ? ~first : first;
        return first < clipped.Length && clipped[first] <= Math.Ceiling(to + late);
    }

    private void Bridge(Channel channel, ReadOnlySpan<double> samples, Span<double> bridged, double late)
    {
        samples.CopyTo(bridged);
        List<int> clipped = [.. _clipped[(int)channel] ?? []];
        int before = -1;
        for (int i = 0; i <= samples.Length; i++)
        {
            bool end = i == samples.Length;
            if (!end && !double.IsFinite(samples[i]))
            {
                clipped.Add((int)(i + late));
                continue;
            }

            double left = before >= 0 ? samples[before] : end ? 0 : samples[i];
            double right = end ? left : samples[i];
            for (int k = before + 1; k < i; k++)
            {
                // By parts of both: their difference can overflow.
                double part = (k - before) / (double)(i - before);
                bridged[k] = (left * (1 - part)) + (right * part);
            }

            before = i;
        }

        clipped.Sort();
        _clipped[(int)channel] = [.. clipped];
    }
}
