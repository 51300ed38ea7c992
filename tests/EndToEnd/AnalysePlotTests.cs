using System.Globalization;
using System.Text;
using System.Text.Json;
using System.Xml.Linq;

namespace EndToEnd;

/// <summary><c>analyse --plot</c>: the picture says what the numbers say, at the places where they say it.</summary>
public sealed class AnalysePlotTests : IDisposable
{
    private static readonly string _train = Workplace.Repository(
        "tests", "reference", "waveforms", "hv650soft-clean.csv.gz");

    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_picture_is_not_written_through_a_link()
    {
        string kept = _place.Path("kept.svg");
        File.WriteAllText(kept, "mine");
        string link = _place.Path("link.svg");
        File.CreateSymbolicLink(link, kept);

        Finished refused = (await _place.Run("analyse", _train, "--plot", link)).Expect(2);

        Assert.Contains($"'{link}' is a symbolic link to {kept}", refused.Error, StringComparison.Ordinal);
        Assert.Equal("mine", File.ReadAllText(kept));
        Assert.NotNull(new FileInfo(link).LinkTarget);
    }

    [Fact]
    public async Task Intervals_and_their_names_lie_where_the_values_say()
    {
        (XElement svg, JsonElement waveform) = await Draw(_train);
        Dictionary<string, JsonElement> values = waveform.GetProperty("quantities").EnumerateArray()
            .Where(one => one.GetProperty("value").ValueKind == JsonValueKind.Number)
            .ToDictionary(one => one.GetProperty("quantity").GetString()!);
        List<string> shaded = [];

        foreach (XElement view in Of(svg, "view"))
        {
            Func<double, double> pixel = TimeAxis(view);
            foreach (XElement interval in Of(view, "interval"))
            {
                JsonElement value = values[interval.Attribute("data-quantity")!.Value];
                double from = pixel(value.GetProperty("from").GetDouble());
                double to = pixel(value.GetProperty("to").GetDouble());
                Assert.Equal(from, Length(interval, "x"), 0.1);
                // A ring's window may go on beyond what the view shows; its end is then the view's.
                double right = Length(interval, "x") + Length(interval, "width");
                double edge = Right(view);
                Assert.Equal(Math.Min(to, edge), right, 0.1);
                string channel = interval.Parent!.Attribute("data-channel")!.Value;
                shaded.Add($"{interval.Attribute("data-quantity")!.Value} {channel}");
            }

            foreach (XElement name in Of(view, "interval-name").Concat(Of(view, "peak-name")))
            {
                string quantity = name.Attribute("data-quantity")!.Value;
                JsonElement value = values[quantity];
                string[] words = name.Value.Split(' ', ',');
                Assert.Equal((quantity, "="), (words[0], words[1]));
                double expected = value.GetProperty("value").GetDouble();
                Assert.InRange(Si(words[2], words[3], value.GetProperty("unit").GetString()!) / expected, 0.999, 1.001);
                Assert.Equal(value.GetProperty("definition").GetString(), words[^1]);
            }
        }

        Assert.Equal(
            [
                "eoff id_low", "eoff vds_low", "eon id_low", "eon vds_low", "qrr id_high", "ring_frequency vds_high",
                "ring_frequency_off vds_low", "trr id_high",
            ],
            shaded.Order(StringComparer.Ordinal));
        Assert.Equal(["id_peak_on", "vds_high_peak_1", "vds_peak_off"],
            Of(svg, "peak-name").Select(name => name.Attribute("data-quantity")!.Value).Order(StringComparer.Ordinal));
    }

    [Fact]
    public async Task No_name_hides_what_it_names()
    {
        (XElement svg, _) = await Draw(Workplace.Repository(
            "tests", "reference", "waveforms", "hv650snap-measured.csv.gz"));

        foreach (XElement name in Of(svg, "interval-name"))
        {
            XElement ground = name.ElementsBeforeSelf().Last();
            double start = Length(ground, "x"), end = start + Length(ground, "width");
            string quantity = name.Attribute("data-quantity")!.Value;
            XElement shaded = Of(svg, "interval").First(one => one.Attribute("data-quantity")!.Value == quantity);
            foreach (double x in (double[])[Length(shaded, "x"), Length(shaded, "x") + Length(shaded, "width")])
            {
                Assert.False(x > start && x < end, $"{quantity}: {x} lies behind the name, {start} to {end}");
            }
        }

        Assert.All(Of(svg, "peak-name"), name =>
            Assert.True(Length(name, "y") < Length(Of(name.Parent!, "frame").Single(), "y")));
    }

    [Fact]
    public async Task A_marked_peak_lies_on_the_trace()
    {
        (XElement svg, _) = await Draw(_train);

        foreach (XElement peak in Of(svg, "peak"))
        {
            (double x, double y) = (Length(peak, "cx"), Length(peak, "cy"));
            double nearest = Points(Of(peak.Parent!, "trace").Single())
                .Min(point => Math.Sqrt(Math.Pow(point.X - x, 2) + Math.Pow(point.Y - y, 2)));
            Assert.InRange(nearest, 0, 1.5);
        }
    }

    [Fact]
    public async Task Every_quantity_stands_in_the_table_with_its_value_or_its_reason()
    {
        (XElement svg, JsonElement waveform) = await Draw(_train);
        string[] rows = [.. Of(svg, "row").Select(cell => cell.Value)];

        foreach (JsonElement value in waveform.GetProperty("quantities").EnumerateArray())
        {
            Assert.Contains(value.GetProperty("quantity").GetString(), rows);
            Assert.Contains(value.GetProperty("definition").GetString(), rows);
            if (value.GetProperty("reason").GetString() is { } reason)
            {
                Assert.Contains($"no value: {reason}", rows);
            }
        }
    }

    [Fact]
    public async Task A_picture_needs_nothing_from_outside_and_can_be_read()
    {
        (XElement svg, _) = await Draw(_train);
        string text = File.ReadAllText(_place.Path("train.svg"));

        Assert.DoesNotContain(
            svg.DescendantsAndSelf(), one => one.Name.LocalName is "script" or "image" or "use" or "style");
        Assert.DoesNotContain(svg.DescendantsAndSelf().Attributes(), one => one.Name.LocalName is "href");
        Assert.DoesNotContain("url(h", text, StringComparison.Ordinal);
        Assert.All(
            svg.Descendants().Where(one => one.Name.LocalName == "text"),
            one => Assert.InRange(one.Attribute("font-size") is null ? 10 : Length(one, "font-size"), 10, 30));
        Assert.True(double.Parse(svg.Attribute("font-size")!.Value, Invariant) >= 10);
        double height = double.Parse(svg.Attribute("height")!.Value, Invariant);
        Assert.All(svg.Descendants().Where(one => one.Name.LocalName == "text"),
            one => Assert.InRange(Length(one, "y"), 0, height));
    }

    [Fact]
    public async Task A_peak_of_one_sample_survives_and_a_long_record_stays_a_small_file()
    {
        const int Count = 400_000, Peak = 123_457;
        StringBuilder csv = new("t,vds_low,id_low\n");
        for (int i = 0; i < Count; i++)
        {
            csv.Append(Invariant, $"{i}e-9,{(i == Peak ? 1000 : i % 7)},{(i == Peak ? -250 : i % 5)}\n");
        }

        (XElement svg, _) = await Draw(Write("long.csv", csv.ToString()));

        foreach ((string channel, double value) in (IEnumerable<(string, double)>)[("vds_low", 1000), ("id_low", -250)])
        {
            XElement panel = Panel(svg, channel);
            double y = ValueAxis(panel)(value);
            double x = TimeAxis(panel.Parent!)(Peak * 1e-9);
            Assert.Contains(Points(Of(panel, "trace").Single()),
                point => Math.Abs(point.X - x) < 0.1 && Math.Abs(point.Y - y) < 0.1);
        }

        Assert.InRange(new FileInfo(_place.Path("train.svg")).Length, 1, 150_000);
    }

    [Fact]
    public async Task Clipped_samples_are_marked_where_they_are()
    {
        string csv = "t,vds_low\n" + string.Concat(Enumerable.Range(0, 100)
            .Select(i => string.Create(Invariant, $"{i}e-9,{(i == 40 ? "inf" : i == 60 ? "-inf" : i)}\n")));

        (XElement svg, _) = await Draw(Write("clipped.csv", csv));

        XElement panel = Panel(svg, "vds_low");
        Func<double, double> pixel = TimeAxis(panel.Parent!);
        XElement frame = Of(panel, "frame").Single();
        double[] marks = [.. Points(Of(panel, "clipped").Single(), 'M').SelectMany(p => (double[])[p.X, p.Y])];
        double[] expected =
        [
            pixel(40e-9), Length(frame, "y"), pixel(60e-9), Length(frame, "y") + Length(frame, "height"),
        ];
        Assert.Equal(expected, marks, (one, other) => Math.Abs(one - other) < 0.1);
    }

    [Fact]
    public async Task A_name_that_XML_would_take_for_its_own_is_escaped()
    {
        Assert.SkipWhen(OperatingSystem.IsWindows(), "its file names hold none of these");
        string file = Write("a<&\">'\u0001.csv", "t,vds_low\n0,1\n1e-9,2\n");

        (XElement svg, _) = await Draw(file);

        Assert.Equal(file.Replace('\u0001', '\uFFFD'), Of(svg, "title").Single().Value);
    }

    [Theory]
    [InlineData("t,vds_low\n0,1e308\n1e-9,-1e308\n")]
    [InlineData("t,vds_low\n0,nan\n1e-9,nan\n")]
    [InlineData("t,vds_low\n0,5e-324\n1e-9,0\n")]
    [InlineData("t,vds_low\n1e9,1\n1.000000001e9,2\n")]
    [InlineData("t,vds_low\n0,1\n1e-300,1\n")]
    [InlineData("t,vds_low\n0,1\n1e300,1\n")]
    public async Task Odd_values_still_make_a_picture_of_finite_numbers(string csv)
    {
        (XElement svg, _) = await Draw(Write("odd.csv", csv));

        foreach (string length in (string[])["x", "y", "x1", "x2", "y1", "y2", "width", "height", "cx", "cy"])
        {
            Assert.All(svg.Descendants().Attributes(length),
                value => Assert.True(double.IsFinite(double.Parse(value.Value, Invariant)), value.ToString()));
        }

        Assert.DoesNotContain("NaN", File.ReadAllText(_place.Path("train.svg")), StringComparison.Ordinal);
    }

    [Fact]
    public async Task An_older_picture_is_replaced_and_nothing_is_left_beside_it()
    {
        File.WriteAllText(_place.Path("train.svg"), "an older one");

        await Draw(_train);

        Assert.Equal(["train.svg"], Directory.GetFiles(_place.Folder).Select(Path.GetFileName));
    }

    [Fact]
    public async Task What_can_be_no_picture_is_refused_before_anything_is_read()
    {
        Directory.CreateDirectory(_place.Path("folder.svg"));
        string csv = Write("wave.svg", "t,vds_low\n0,1\n1e-9,2\n");
        foreach ((string[] arguments, string message) in (IEnumerable<(string[], string)>)
            [
                ([_train, "--plot", "train.png"], "expected a name that ends in .svg"),
                ([_train, "--plot", "folder.svg"], "is a directory"),
                ([_train, "--plot", "nowhere/train.svg"], "does not exist"),
                ([_train, _train, "--plot", "train.svg"], "expected one waveform"),
                ([csv, "--plot", "wave.svg"], "is the waveform itself"),
            ])
        {
            Finished refused = (await _place.Run(["analyse", .. arguments])).Expect(2);
            Assert.Contains(message, refused.Error, StringComparison.Ordinal);
            Assert.Empty(refused.Output);
        }

        Assert.StartsWith("t,vds_low", File.ReadAllText(csv), StringComparison.Ordinal);
    }

    private static CultureInfo Invariant => CultureInfo.InvariantCulture;

    private async Task<(XElement Svg, JsonElement Waveform)> Draw(string file)
    {
        Finished said = (await _place.Run("analyse", file, "--plot", "train.svg", "--json")).Expect(0);
        using JsonDocument document = JsonDocument.Parse(said.Output);
        return (
            XDocument.Load(_place.Path("train.svg")).Root!,
            document.RootElement.GetProperty("waveforms")[0].Clone());
    }

    private string Write(string name, string text)
    {
        File.WriteAllText(_place.Path(name), text);
        return _place.Path(name);
    }

    private static IEnumerable<XElement> Of(XElement within, string kind) =>
        within.DescendantsAndSelf().Where(one => one.Attribute("class")?.Value == kind);

    /// <summary>A panel of the view of the whole record.</summary>
    private static XElement Panel(XElement svg, string channel) => Of(Of(svg, "view").First(), "panel")
        .Single(panel => panel.Attribute("data-channel")!.Value == channel);

    private static double Right(XElement view)
    {
        XElement frame = Of(view, "frame").First();
        return Length(frame, "x") + Length(frame, "width");
    }

    private static double Length(XElement of, string name) => double.Parse(of.Attribute(name)!.Value, Invariant);

    /// <summary>From seconds to pixels, by the ticks that a reader sees.</summary>
    private static Func<double, double> TimeAxis(XElement view)
    {
        string unit = Of(view, "time-unit").Single().Value.Split(' ')[^1];
        return Axis([.. Of(view, "time-tick").Where(one => one.Name.LocalName == "text")], "x", unit, "s");
    }

    /// <summary>From volts or amperes to pixels.</summary>
    private static Func<double, double> ValueAxis(XElement panel)
    {
        string[] name = Of(panel, "channel").Single().Value.Split(", ");
        XElement[] texts = [.. Of(panel, "value-tick").Where(one => one.Name.LocalName == "text")];
        Func<double, double> text = Axis(texts, "y", name[1], name[1][^1..]);
        // A text stands a little below its line.
        double below = Length(texts[0], "y") - Length(Of(panel, "value-tick").First(), "y1");
        return value => text(value) - below;
    }

    private static Func<double, double> Axis(XElement[] ticks, string along, string scaled, string unit)
    {
        (double first, double last) = (Si(ticks[0].Value, scaled, unit), Si(ticks[^1].Value, scaled, unit));
        (double from, double to) = (Length(ticks[0], along), Length(ticks[^1], along));
        return value => from + ((value - first) / (last - first) * (to - from));
    }

    private static double Si(string number, string scaled, string unit)
    {
        Assert.EndsWith(unit == "1" ? "" : unit, scaled, StringComparison.Ordinal);
        string prefix = unit == "1" ? "" : scaled[..^unit.Length];
        double factor = prefix switch
        {
            "" => 1,
            "f" => 1e-15,
            "p" => 1e-12,
            "n" => 1e-9,
            "u" or "µ" => 1e-6,
            "m" => 1e-3,
            "k" => 1e3,
            "M" => 1e6,
            "G" => 1e9,
            _ => throw new ArgumentException($"prefix '{prefix}'"),
        };
        return double.Parse(number, Invariant) * factor;
    }

    private static IEnumerable<(double X, double Y)> Points(XElement path, char from = ' ') => path
        .Attribute("d")!.Value.Split(from == ' ' ? ['M', 'L'] : [from], StringSplitOptions.RemoveEmptyEntries)
        .Select(point => point.Split(' ', 'l'))
        .Select(pair => (double.Parse(pair[0], Invariant), double.Parse(pair[1], Invariant)));
}
