using BenchRunner.Acceptance.Files;
using BenchRunner.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Plots;

/// <summary>A view drawn: its shaded intervals named above, one panel a channel, one time axis below.</summary>
/// <param name="svg">The picture.</param>
/// <param name="file">The waveform.</param>
/// <param name="view">What is shown.</param>
/// <param name="left">Left edge of the panels.</param>
/// <param name="width">Their width.</param>
internal sealed class Panels(Svg svg, AnalysedFile file, View view, double left, double width)
{
    /// <summary>Height of a line that names an interval.</summary>
    public const double Row = 15;

    /// <summary>Above each panel: its channel's name stands there, and a peak's value.</summary>
    private const double Gap = 16;

    /// <summary>About the width of a letter.</summary>
    private const double Letter = 6;

    private const string Dark = "#000000";
    private const string Grey = "#777777";
    private const string Light = "#cccccc";

    private readonly Axis _times = new(view.Start, view.End, left, left + width, "s");

    /// <summary>Height of what <see cref="Draw"/> draws.</summary>
    public static double Height(int panels, double panel, int rows) =>
        (2 * Gap) + 4 + (rows * Row) + (panels * (panel + Gap)) + 24;

    /// <summary>Fillings of shaded intervals, told apart in black and white too.</summary>
    public static void Define(Svg svg)
    {
        svg.Open("defs");
        string[] lines = ["M0 0L6 6M-1 5L1 7M5 -1L7 1", "M0 6L6 0M-1 1L1 -1M5 7L7 5", "M3 0L3 6", "M0 3L6 3"];
        for (int i = 0; i < lines.Length; i++)
        {
            svg.Open("pattern", ("id", Filling(i)), ("width", "6"), ("height", "6"),
                ("patternUnits", "userSpaceOnUse"));
            svg.Shape("path", ("d", lines[i]), ("stroke", "#999999"), ("stroke-width", "0.8"), ("fill", "none"));
            svg.Close();
        }

        svg.Close();
    }

    /// <summary>Draws.</summary>
    /// <param name="top">Upper edge.</param>
    /// <param name="rows">Lines kept free for the names of intervals.</param>
    /// <param name="height">Height of a panel.</param>
    public void Draw(double top, int rows, double height)
    {
        svg.Open("g", ("class", "view"), ("data-view", view.Name));
        svg.Text(left, top + 11, view.Name, "view-name", "start", ("font-weight", "bold"));
        for (int i = 0; i < view.Intervals.Count; i++)
        {
            Name(view.Intervals[i], top + Gap + 4 + (i * Row));
        }

        double y = top + Gap + 4 + (rows * Row) + Gap;
        double bottom = y;
        foreach (Channel channel in file.Waveform.Channels)
        {
            Panel(channel, bottom, height);
            bottom += height + Gap;
        }

        Edges(y, bottom - Gap);
        TimeAxis(y, bottom - Gap);
        svg.Close();
    }

    private static string Filling(int number) => $"hatch-{number % 4}";

    /// <summary>A bracket over the interval, and beside it the quantity with its value, unit and definition.</summary>
    private void Name(QuantityValue value, double y)
    {
        double from = _times.Pixel(value.From!.Value), to = _times.Pixel(value.To!.Value);
        double middle = y + (Row / 2);
        svg.Shape("path", ("class", "bracket"), ("data-quantity", value.Quantity),
            ("d", $"M{Svg.Length(from)} {Svg.Length(middle - 4)}L{Svg.Length(from)} {Svg.Length(middle + 4)}"
                + $"M{Svg.Length(from)} {Svg.Length(middle)}L{Svg.Length(to)} {Svg.Length(middle)}"
                + $"M{Svg.Length(to)} {Svg.Length(middle - 4)}L{Svg.Length(to)} {Svg.Length(middle + 4)}"),
            ("stroke", Dark), ("fill", "none"));
        string text = $"{value.Quantity} = {SiText.Format(value.Value!.Value, value.Unit, 4)}, {value.Definition}";
        double length = Letter * text.Length;
        (double x, string anchor) = to + 6 + length <= left + width + 20 ? (to + 6, "start")
            : from - 6 - length >= left - 60 ? (from - 6, "end")
            : to - from >= length + 24 ? ((from + to) / 2, "middle")
            : (left + width, "end");
        Ground(x, middle + 4, length, anchor);
        svg.Text(x, middle + 4, text, "interval-name", anchor, ("data-quantity", value.Quantity));
    }

    private void Panel(Channel channel, double top, double height)
    {
        TraceLine line = TraceLine.Of(file, channel, view.Start, view.End, (int)width);
        bool empty = line.Lowest > line.Highest;
        Axis values = Axis.Around(
            empty ? 0 : line.Lowest, empty ? 1 : line.Highest, top + height, top, channel.Unit());
        svg.Open("g", ("class", "panel"), ("data-channel", channel.Name()));
        svg.Shape("rect", ("class", "frame"), ("x", Svg.Length(left)), ("y", Svg.Length(top)),
            ("width", Svg.Length(width)), ("height", Svg.Length(height)), ("fill", "none"), ("stroke", Grey));
        Shade(channel, top, height);
        foreach ((double value, string text) in values.Ticks(3))
        {
            double y = values.Pixel(value);
            svg.Line(left, y, left + width, y, Light, "value-tick");
            svg.Text(left - 4, y + 3.5, text, "value-tick", "end", ("font-size", "10"));
        }

        svg.Shape("path", ("class", "trace"), ("d", line.Path(_times, values)), ("fill", "none"), ("stroke", Dark),
            ("stroke-width", "1"), ("stroke-linejoin", "round"));
        if (line.ClippedPath(_times, values) is { Length: > 0 } clipped)
        {
            svg.Shape("path", ("class", "clipped"), ("d", clipped), ("fill", Dark));
        }

        Peaks(channel, values, top);
        svg.Text(left, top - 3, $"{channel.Name()}, {values.ScaledUnit}", "channel");
        svg.Close();
    }

    private void Shade(Channel channel, double top, double height)
    {
        for (int i = 0; i < view.Intervals.Count; i++)
        {
            QuantityValue value = view.Intervals[i];
            if (View.Channels(value, file.Settings).Contains(channel))
            {
                double from = _times.Pixel(value.From!.Value), to = _times.Pixel(value.To!.Value);
                svg.Shape("rect", ("class", "interval"), ("data-quantity", value.Quantity), ("x", Svg.Length(from)),
                    ("y", Svg.Length(top)), ("width", Svg.Length(to - from)), ("height", Svg.Length(height)),
                    ("fill", $"url(#{Filling(i)})"), ("stroke", Grey), ("stroke-width", "0.6"));
            }
        }
    }

    /// <summary>Rings the peaks; what they are stands above the panel, where it hides nothing.</summary>
    private void Peaks(Channel channel, Axis values, double top)
    {
        foreach (QuantityValue peak in view.Peaks.Where(
            peak => View.Channels(peak, file.Settings).LastOrDefault() == channel))
        {
            double x = _times.Pixel(TraceLine.TimeOfMaximum(file, channel, peak.From!.Value, peak.To!.Value));
            double y = values.Pixel(peak.Value!.Value);
            string text = $"{peak.Quantity} = {SiText.Format(peak.Value.Value, peak.Unit, 4)}, {peak.Definition}";
            svg.Shape("circle", ("class", "peak"), ("data-quantity", peak.Quantity), ("cx", Svg.Length(x)),
                ("cy", Svg.Length(y)), ("r", "3"), ("fill", "none"), ("stroke", Dark));
            svg.Text(left + width, top - 3, text, "peak-name", "end", ("data-quantity", peak.Quantity));
        }
    }

    /// <summary>White ground for a text over whatever is drawn below it.</summary>
    private void Ground(double x, double y, double length, string anchor)
    {
        double start = anchor switch { "start" => x - 1, "end" => x - length, _ => x - (length / 2) };
        svg.Shape("rect", ("class", "ground"), ("x", Svg.Length(start)), ("y", Svg.Length(y - 10)),
            ("width", Svg.Length(length + 1)), ("height", "13"), ("fill", "#ffffff"), ("fill-opacity", "0.85"));
    }

    private void Edges(double top, double bottom)
    {
        TrainFacts train = file.Result.Train;
        foreach ((string name, PulseEdge? edge) in (IEnumerable<(string, PulseEdge?)>)
            [("on1", train.On1), ("off1", train.Off1), ("on2", train.On2), ("off2", train.Off2)])
        {
            if (edge is { } found && found.At >= view.Start && found.At <= view.End)
            {
                double x = _times.Pixel(found.At);
                svg.Line(x, top, x, bottom, Grey, "edge", "2 3");
                Ground(x + 3, bottom - 3, Letter * name.Length, "start");
                svg.Text(x + 3, bottom - 3, name, "edge", "start", ("data-edge", name), ("font-size", "10"));
            }
        }
    }

    private void TimeAxis(double top, double bottom)
    {
        svg.Open("g", ("class", "time-axis"));
        foreach ((double time, string text) in _times.Ticks((int)(width / 90)))
        {
            double x = _times.Pixel(time);
            svg.Line(x, top, x, bottom, Light, "time-tick", "1 4");
            svg.Line(x, bottom, x, bottom + 4, Dark, "time-tick");
            svg.Text(x, bottom + 15, text, "time-tick", "middle", ("font-size", "10"));
        }

        svg.Text(left + width, bottom + 27, $"time, {_times.ScaledUnit}", "time-unit", "end");
        svg.Close();
    }
}
