using System.Text;
using BenchRunner.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Plots;

/// <summary>One channel as a line of few points: of each pixel's samples the lowest and the highest stay, so that no
/// peak is lost.</summary>
/// <remarks>Its stated offset, gain and skew are taken out, as the analysis does.</remarks>
internal sealed class TraceLine
{
    private readonly List<(double Time, double Value, bool Joined)> _points = [];
    private readonly List<(double Time, bool High, bool Low)> _clipped = [];
    private readonly AnalysedFile _file;
    private readonly Channel _channel;
    private readonly ChannelCorrection _stated;
    private readonly (double Low, double High) _rails;
    private bool _joined;

    private TraceLine(AnalysedFile file, Channel channel)
    {
        (_file, _channel) = (file, channel);
        _stated = file.Settings.Corrections.GetValueOrDefault(channel) ?? new ChannelCorrection();
        _rails = file.Rails.GetValueOrDefault(channel, (double.NegativeInfinity, double.PositiveInfinity));
    }

    /// <summary>The lowest value shown, V or A; above <see cref="Highest"/> where there is none.</summary>
    public double Lowest { get; private set; } = double.PositiveInfinity;

    /// <summary>The highest value shown, V or A.</summary>
    public double Highest { get; private set; } = double.NegativeInfinity;

    /// <summary>Takes a channel's samples of a window.</summary>
    /// <param name="file">The waveform.</param>
    /// <param name="channel">The channel; present.</param>
    /// <param name="start">Start of the window, s.</param>
    /// <param name="end">End of the window, s.</param>
    /// <param name="columns">Pixels across.</param>
    public static TraceLine Of(AnalysedFile file, Channel channel, double start, double end, int columns)
    {
        TraceLine line = new(file, channel);
        Waveform waveform = file.Waveform;
        int first = line.Index(start, up: true), last = line.Index(end, up: false);
        long count = last - (long)first + 1;
        long parts = count <= 2L * columns ? count : columns;
        for (long part = 0; part < parts; part++)
        {
            int from = first + (int)(part * count / parts), to = first + (int)((part + 1) * count / parts);
            line.Take(waveform[channel][from..to], from);
        }

        return line;
    }

    /// <summary>The line as the data of an SVG path.</summary>
    public string Path(Axis times, Axis values)
    {
        StringBuilder path = new();
        foreach ((double time, double value, bool joined) in _points)
        {
            path.Append(joined ? 'L' : 'M').Append(Svg.Length(times.Pixel(time))).Append(' ')
                .Append(Svg.Length(values.Pixel(value)));
        }

        return path.ToString();
    }

    /// <summary>Triangles at the edge beyond which samples were clipped, as the data of an SVG path.</summary>
    public string ClippedPath(Axis times, Axis values)
    {
        StringBuilder path = new();
        double before = double.NaN;
        foreach ((double time, bool high, bool low) in _clipped)
        {
            double x = times.Pixel(time);
            if (x - before < 1)
            {
                continue;
            }

            before = x;
            path.Append(high ? $"M{Svg.Length(x)} {Svg.Length(values.To)}l-3 6l6 0z" : "");
            path.Append(low ? $"M{Svg.Length(x)} {Svg.Length(values.From)}l-3 -6l6 0z" : "");
        }

        return path.ToString();
    }

    /// <summary>When a channel is highest within an interval, s.</summary>
    public static double TimeOfMaximum(AnalysedFile file, Channel channel, double from, double to)
    {
        TraceLine line = new(file, channel);
        int first = line.Index(from, up: true), best = first;
        ReadOnlySpan<double> samples = file.Waveform[channel];
        for (int i = first; i <= line.Index(to, up: false); i++)
        {
            best = samples[i] / line._stated.Gain > samples[best] / line._stated.Gain ? i : best;
        }

        return line.Time(best);
    }

    private int Index(double time, bool up)
    {
        Waveform waveform = _file.Waveform;
        double index = (time + _stated.Skew - waveform.TimeOrigin) / waveform.SampleInterval;
        // A window's end that lies on a sample shows that sample, whatever the last bit of the division says.
        return (int)Math.Clamp(up ? Math.Ceiling(index - 1e-6) : Math.Floor(index + 1e-6), 0, waveform.Count - 1);
    }

    private void Take(ReadOnlySpan<double> samples, int offset)
    {
        int lowest = -1, highest = -1;
        bool high = false, low = false;
        int clipped = -1;
        for (int i = 0; i < samples.Length; i++)
        {
            double sample = samples[i];
            bool isHigh = sample >= _rails.High || double.IsNaN(sample), isLow = sample <= _rails.Low;
            if (isHigh || isLow)
            {
                (high, low, clipped) = (high || isHigh, low || isLow, i);
            }

            if (double.IsFinite(sample))
            {
                lowest = lowest < 0 || sample < samples[lowest] ? i : lowest;
                highest = highest < 0 || sample > samples[highest] ? i : highest;
            }
        }

        if (clipped >= 0)
        {
            _clipped.Add((Time(offset + clipped), high, low));
        }

        if (lowest < 0)
        {
            _joined = false;
            return;
        }

        Add(offset, Math.Min(lowest, highest), samples);
        if (lowest != highest)
        {
            Add(offset, Math.Max(lowest, highest), samples);
        }
    }

    private void Add(int offset, int index, ReadOnlySpan<double> samples)
    {
        double value = (samples[index] - (_stated.Offset ?? 0)) / _stated.Gain;
        _points.Add((Time(offset + index), value, _joined));
        _joined = true;
        Lowest = Math.Min(Lowest, value);
        Highest = Math.Max(Highest, value);
    }

    private double Time(int index) => _file.Waveform.TimeAt(index) - _stated.Skew;
}
