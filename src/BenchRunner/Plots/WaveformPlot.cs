using BenchRunner.Acceptance.Files;
using BenchRunner.Files;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Plots;

/// <summary>One waveform on one page: the whole train, the turn-off and the turn-on, and every quantity.</summary>
internal static class WaveformPlot
{
    private const double Width = 1180;
    private const double Left = 60;
    private const double Right = 20;
    private const double Between = 70;
    private const double WholePanel = 64;
    private const double EdgePanel = 110;
    private const double Head = 46;
    private const double TableRow = 14;

    /// <summary>Draws a waveform.</summary>
    /// <param name="stream">Receives the SVG.</param>
    /// <param name="file">The waveform with its analysis.</param>
    public static void Write(Stream stream, AnalysedFile file)
    {
        int panels = file.Waveform.Channels.Count();
        View? off = View.TurnOff(file), on = View.TurnOn(file);
        int rows = Math.Max(off?.Intervals.Count ?? 0, on?.Intervals.Count ?? 0);
        double edgesTop = Head + Panels.Height(panels, WholePanel, 0);
        double edges = off is null && on is null ? Panels.Row : Panels.Height(panels, EdgePanel, rows);
        double tableTop = edgesTop + edges + 10;
        double height = tableTop + ((file.Result.Quantities.Count + 2) * TableRow) + 10;
        using Svg svg = new(stream, Width, height);
        svg.Shape("rect", ("class", "paper"), ("width", Svg.Length(Width)), ("height", Svg.Length(height)),
            ("fill", "#ffffff"));
        Panels.Define(svg);
        svg.Text(Left, 18, file.Name, "title", "start", ("font-size", "14"), ("font-weight", "bold"));
        svg.Text(
            Left, 34,
            $"{file.Waveform.Count} samples at {SiText.Format(file.Waveform.SampleInterval, "s")}; stated offset, gain "
                + "and skew of each channel are taken out; triangles: clipped samples; of each pixel the lowest and "
                + "the highest sample are drawn",
            "subtitle");
        new Panels(svg, file, View.Whole(file), Left, Width - Left - Right).Draw(Head, 0, WholePanel);
        double width = (Width - Left - Right - Between) / 2;
        Draw(svg, file, off, "turn-off: off1 is outside the record", Left, width, edgesTop, rows);
        Draw(svg, file, on, "turn-on: on2 is outside the record", Left + width + Between, width, edgesTop, rows);
        Table(svg, file, tableTop);
    }

    private static void Draw(
        Svg svg, AnalysedFile file, View? view, string absent, double left, double width, double top, int rows)
    {
        if (view is null)
        {
            svg.Text(left, top + 11, absent, "absent");
        }
        else
        {
            new Panels(svg, file, view, left, width).Draw(top, rows, EdgePanel);
        }
    }

    private static void Table(Svg svg, AnalysedFile file, double top)
    {
        double[] columns = [Left, Left + 160, Left + 400, Left + 520, Left + 640];
        Line(["quantity", "definition", "value", "from", "to"], top, "head");
        double y = top;
        foreach (QuantityValue value in file.Result.Quantities)
        {
            y += TableRow;
            Line(
                value.Value is { } number
                    ? [value.Quantity, value.Definition, SiText.Format(number, value.Unit, 5), Time(value.From),
                        Time(value.To)]
                    : [value.Quantity, value.Definition, $"no value: {value.Reason}"],
                y, "row");
        }

        void Line(string[] cells, double at, string kind)
        {
            for (int i = 0; i < cells.Length; i++)
            {
                svg.Text(columns[i], at + 11, cells[i], kind, "start",
                    ("font-weight", kind == "head" ? "bold" : "normal"));
            }
        }
    }

    private static string Time(double? time) => time is { } at ? SiText.Format(at, "s", 7) : "";
}
