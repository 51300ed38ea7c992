using System.Numerics;
using System.Runtime.InteropServices;
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

    private Clipping(Waveform bridged) => Bridged = bridged;

    /// <summary>The record with every sample finite.</summary>
    public Waveform Bridged { get; private set; }

    /// <summary>Looks a record over.</summary>
    public static Clipping Of(Waveform waveform, AnalysisSettings settings)
    {
        Clipping clipping = new(waveform);
        Dictionary<Channel, double[]>? bridged = null;
        foreach (Channel channel in ChannelNames.All)
        {
            if (!waveform.Has(channel))
            {
                continue;
            }

            ReadOnlySpan<double> samples = waveform[channel];
            settings.Corrections.TryGetValue(channel, out ChannelCorrection? correction);
            double step = waveform.Step(channel) > 0 ? waveform.Step(channel) : SmallestStep.OfValues(samples);
            clipping._step[(int)channel] = step / Math.Abs(correction?.Gain ?? 1);
            clipping._late[(int)channel] = (correction?.Skew ?? 0) / waveform.SampleInterval;
            if (!IsFinite(samples))
            {
                bridged ??= [];
                bridged[channel] = clipping.Bridge(channel, samples);
            }
        }

        clipping.Bridged = bridged is null ? waveform : waveform.With(bridged);
        return clipping;
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

    /// <summary>Whether all samples are finite: x · 0 is 0, or NaN from the first infinity or NaN on.</summary>
    private static bool IsFinite(ReadOnlySpan<double> samples)
    {
        ReadOnlySpan<Vector<double>> wide = MemoryMarshal.Cast<double, Vector<double>>(samples);
        Vector<double> sums = Vector<double>.Zero;
        foreach (Vector<double> x in wide)
        {
            sums += x * Vector<double>.Zero;
        }

        double sum = Vector.Sum(sums);
        foreach (double x in samples[(wide.Length * Vector<double>.Count)..])
        {
            sum += x * 0;
        }

        return sum == 0;
    }

    private double[] Bridge(Channel channel, ReadOnlySpan<double> samples)
    {
        double[] bridged = samples.ToArray();
        List<int> clipped = [];
        int before = -1;
        for (int i = 0; i <= samples.Length; i++)
        {
            bool end = i == samples.Length;
            if (!end && !double.IsFinite(samples[i]))
            {
                clipped.Add(i);
                continue;
            }

            double left = before >= 0 ? samples[before] : end ? 0 : samples[i];
            double right = end ? left : samples[i];
            for (int k = before + 1; k < i; k++)
            {
                bridged[k] = left + ((right - left) * (k - before) / (i - before));
            }

            before = i;
        }

        _clipped[(int)channel] = [.. clipped];
        return bridged;
    }
}
