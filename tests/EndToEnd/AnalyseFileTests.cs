using System.Globalization;
using System.IO.Compression;
using System.Security.Cryptography;
using System.Text;
using System.Text.Json;

namespace EndToEnd;

/// <summary><c>analyse</c> of the files that people have: what can be read is, the rest is exit 2 with its
/// place.</summary>
public sealed class AnalyseFileTests : IDisposable
{
    private static readonly string _train = Workplace.Repository(
        "tests", "reference", "waveforms", "hv650soft-clean.csv.gz");

    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task One_record_in_seven_styles_says_the_same_to_the_last_bit()
    {
        (string[] names, string[][] rows) = Rows(take: int.MaxValue);
        string expected = await Quantities(_train);
        string table = string.Join("\n", rows.Select(row => string.Join(',', row)));
        string header = string.Join(',', names);

        string crlf = $"\uFEFF{header}\n{table}\n\n".ReplaceLineEndings("\r\n");
        Assert.Equal(expected, await Quantities(Write("crlf.csv", crlf)));
        string semicolon = $"{header}\n{table}".Replace(',', ';').Replace('.', ',');
        Assert.Equal(expected, await Quantities(Write("semicolon.csv", semicolon)));
        Assert.Equal(expected, await Quantities(Write("tab.csv", $"{header}\n{table}".Replace(',', '\t'))));
        string trailing = $"{header}\n{table}\n".Replace("\n", ",\n", StringComparison.Ordinal);
        Assert.Equal(expected, await Quantities(Write("trailing.csv", trailing + ",,,\n")));
        string units = "s," + string.Join(',', names.Skip(1).Select(name => name[0] == 'v' ? "V" : "A"));
        Assert.Equal(expected, await Quantities(Write(
            "preamble.csv",
            "Recorder,made up\nSource,vds_low\nPoints,10801\nInterval,1E-09\nVertical Units,V\n\n"
                + $"{header}\n{units}\n{table}\n")));

        // Columns under other names, in another order, behind one that nobody wants; by name and by number.
        int[] order = [.. Enumerable.Range(1, names.Length - 1).Reverse()];
        string foreign = "Nr;" + string.Join(';', order.Select(i => $"C{i}")) + "\n" + string.Join('\n', rows.Select(
            (row, number) => $"{number};" + string.Join(';', order.Select(i => row[i]))));
        string[] byName = [.. order.SelectMany((i, place) => (string[])
            ["--channel", place % 2 == 0 ? $"{names[i]}=C{i}" : $"{names[i]}={place + 2}"])];
        Assert.Equal(
            expected, await Quantities([Write("foreign.csv", foreign), "--interval", "1 ns", .. byName]));

        // One channel a file, each with a time column of its own.
        List<string> mapped = [];
        for (int i = 1; i < names.Length; i++)
        {
            string file = Write(
                $"{i}.csv",
                "Made by,nobody\nTIME,CH1\n" + string.Join('\n', rows.Select(row => $"{row[0]},{row[i]}")));
            mapped.AddRange(["--channel", i == 1 ? $"{names[i]}=CH1" : $"{names[i]}={file}:CH1"]);
        }

        Assert.Equal(expected, await Quantities([_place.Path("1.csv"), .. mapped]));
    }

    [Theory]
    [InlineData("t,vds_low\n0,1\n1e-9,high\n", "wave.csv:3:6: 'high'; expected a number in V or A")]
    [InlineData("t,vds_low\n0,1\n1e-9,2\n3e-9,3\n4e-9,4\n",
        "wave.csv:4:1: an interval of 2E-09 s where the first is 1E-09 s")]
    [InlineData("t,vds_low\n0,1\n-1e-9,2\n", "wave.csv:3:1: time goes from 0 s to -1E-09 s")]
    [InlineData("t,vds_low\n0,1,5\n1e-9,2,5\n",
        "wave.csv:2: 3 fields; expected 2 as in the header; correct the row; where the comma is the decimal sign")]
    [InlineData("Points,2\nInterval,1e-9\nvds_low\n1\n2\n",
        "wave.csv:3:1: first column 'vds_low'; expected the time column t; add it, or state the sample interval by "
        + "--interval")]
    [InlineData("t,vds_low\n", "wave.csv:1: 0 rows of data")]
    [InlineData("t,vds_low\n0,1\n", "wave.csv:2: 1 row of data")]
    [InlineData("", "wave.csv:1:1: the file is empty")]
    public async Task What_cannot_be_read_is_exit_2_with_place_and_advice(string text, string message)
    {
        Write("wave.csv", text);

        await Refused(message, "wave.csv");
    }

    [Fact]
    public async Task What_is_no_text_is_said()
    {
        File.WriteAllText(_place.Path("wide.csv"), "t,vds_low\n0,1\n1e-9,2\n", Encoding.Unicode);
        File.WriteAllBytes(_place.Path("nul.csv"), [.. "t,vds_low\n"u8, 0, .. ",1\n"u8]);
        File.WriteAllBytes(_place.Path("bare.csv"), Encoding.BigEndianUnicode.GetBytes("t,vds_low\n0,1\n"));

        await Refused("wide.csv:1:1: UTF-16 text; expected UTF-8", "wide.csv");
        await Refused("nul.csv:2:1: '\uFFFD'; expected a time in s", "nul.csv");
        await Refused("bare.csv:1:1: a NUL byte; expected a text table", "bare.csv");
        await Refused($"{_place.Folder}: a directory; expected a file", _place.Folder);
        File.WriteAllBytes(_place.Path("cut.csv.gz"), File.ReadAllBytes(_train)[..^2000]);
        await Refused("cut.csv.gz: damaged gzip:", "cut.csv.gz");
        await Refused("none.csv: there is no such file", "none.csv");
    }

    [Fact]
    public async Task What_can_be_read_only_once_is_read_once()
    {
        Assert.SkipWhen(OperatingSystem.IsWindows(), "its standard input is no file");
        byte[] bytes = File.ReadAllBytes(_train);
        using Started analyse = _place.Start("analyse", "/dev/stdin", "--json");
        await analyse.Input.BaseStream.WriteAsync(bytes, TestContext.Current.CancellationToken);
        analyse.Input.Close();

        Finished said = (await analyse.End()).Expect(0);

        using JsonDocument document = JsonDocument.Parse(said.Output);
        JsonElement waveform = document.RootElement.GetProperty("waveforms")[0];
        Assert.Equal(Convert.ToHexStringLower(SHA256.HashData(bytes)), waveform.GetProperty("sha256").GetString());
        Assert.Equal(10801, waveform.GetProperty("samples").GetInt32());
        await Refused("/dev/null:1:1: the file is empty", "/dev/null");
        await Refused("/dev/zero:1: a line of more than 64 kB", "/dev/zero");
    }

    [Fact]
    public async Task Channels_that_do_not_fit_together_are_refused()
    {
        Write("a.csv", "t,vds_low\n0,1\n1e-9,2\n2e-9,3\n");
        Write("short.csv", "t,i\n0,1\n1e-9,2\n");
        Write("slow.csv", "t,i\n0,1\n2e-9,2\n4e-9,3\n");

        await Refused(
            "short.csv: 2 samples of 1E-09 s from 0 s; expected the time base of a.csv, 3 samples",
            "a.csv", "--channel", "id_low=short.csv:i");
        await Refused("slow.csv: 3 samples of 2E-09 s", "a.csv", "--channel", "id_low=slow.csv:i");
        await Refused("no column 'u'; expected one of t, i", "a.csv", "--channel", "id_low=slow.csv:u");
        await Refused("2 columns for one channel", "a.csv", "--channel", "id_low=2", "--channel", "id_low=slow.csv:i");
    }

    [Theory]
    [Trait("kind", "slow")]
    [InlineData(2.0, 10.8, "bus_droop", "on1 is outside the record", "eon eoff qrr trr irm i_on i_off ring_frequency")]
    [InlineData(0, 9.6, null, null, "eon eoff qrr trr irm i_on i_off bus_droop ring_frequency")]
    [InlineData(4.0, 7.0, "eon", "on2 is outside the record", "i_off vds_peak_off vds_on ramp_slope")]
    [InlineData(7.0, 10.8, "eoff", "off1 is outside the record", "eon i_on qrr trr td_on")]
    [InlineData(8.0, 9.4, "eoff", "off1 is outside the record", "")]
    public async Task A_part_of_the_train_gives_what_it_holds_and_reasons_for_the_rest(
        double from, double to, string? lost, string? reason, string kept)
    {
        (string[] names, string[][] rows) = Rows(int.MaxValue);
        string part = string.Join(',', names) + "\n" + string.Join('\n', rows
            .Where(row => double.Parse(row[0], CultureInfo.InvariantCulture) * 1e6 is var time
                && time >= from && time <= to)
            .Select(row => string.Join(',', row)));

        JsonElement[] values = await Values(Write("part.csv", part));

        Assert.All(values, one => Assert.NotEqual(
            one.GetProperty("value").ValueKind == JsonValueKind.Null,
            one.GetProperty("reason").ValueKind == JsonValueKind.Null));
        if (lost is not null)
        {
            Assert.Equal(reason, values.Single(one => one.GetProperty("quantity").GetString() == lost)
                .GetProperty("reason").GetString());
        }

        foreach (string quantity in kept.Split(' ', StringSplitOptions.RemoveEmptyEntries))
        {
            JsonElement value = values.Single(one => one.GetProperty("quantity").GetString() == quantity);
            Assert.True(
                value.GetProperty("value").ValueKind == JsonValueKind.Number,
                $"{quantity}: {value.GetProperty("reason")}");
        }
    }

    [Theory]
    [Trait("kind", "slow")]
    [InlineData("vbus", "bus_voltage", "vbus is not measured and the diode's forward voltage is not stated")]
    [InlineData("vds_high", "ring_frequency", "vds_high is not measured")]
    [InlineData("vgs_low", "eon", "vgs_low is not measured")]
    [InlineData("id_low", "eon", "id_low is not measured")]
    public async Task A_record_without_a_channel_says_what_that_costs(string channel, string quantity, string reason)
    {
        (string[] names, string[][] rows) = Rows(int.MaxValue);
        int without = Array.IndexOf(names, channel);
        string part = string.Join('\n', ((string[][])[names, .. rows])
            .Select(row => string.Join(',', row.Where((_, i) => i != without))));

        JsonElement[] values = await Values(Write("without.csv", part));

        Assert.Equal(reason, values.Single(one => one.GetProperty("quantity").GetString() == quantity)
            .GetProperty("reason").GetString());
        Assert.All(values, one => Assert.NotEqual(
            one.GetProperty("value").ValueKind == JsonValueKind.Null,
            one.GetProperty("reason").ValueKind == JsonValueKind.Null));
    }

    private async Task Refused(string message, params string[] arguments)
    {
        Finished refused = (await _place.Run(["analyse", .. arguments])).Expect(2);
        Assert.Contains(message, refused.Error, StringComparison.Ordinal);
        Assert.Empty(refused.Output);
    }

    private async Task<JsonElement[]> Values(params string[] arguments)
    {
        Finished said = (await _place.Run(["analyse", .. arguments, "--json"])).Expect(0);
        using JsonDocument document = JsonDocument.Parse(said.Output);
        return
        [
            .. document.RootElement.GetProperty("waveforms")[0].GetProperty("quantities").EnumerateArray()
                .Select(one => one.Clone()),
        ];
    }

    private async Task<string> Quantities(params string[] arguments) =>
        string.Join('\n', (await Values(arguments)).Select(one => one.GetRawText()));

    private string Write(string name, string text)
    {
        File.WriteAllText(_place.Path(name), text);
        return _place.Path(name);
    }

    /// <summary>Fields of the reference record as they are written there.</summary>
    private static (string[] Names, string[][] Rows) Rows(int take)
    {
        using StreamReader reader = new(new GZipStream(File.OpenRead(_train), CompressionMode.Decompress));
        string[] names = reader.ReadLine()!.Split(',');
        List<string[]> rows = [];
        while (rows.Count < take && reader.ReadLine() is { } line)
        {
            rows.Add(line.Split(','));
        }

        return (names, [.. rows]);
    }
}
