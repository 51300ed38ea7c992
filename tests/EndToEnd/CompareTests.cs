using System.Globalization;
using System.IO.Compression;
using System.Text.Json;

namespace EndToEnd;

/// <summary><c>compare</c>: two waveform files in, errors and a verdict out.</summary>
public sealed class CompareTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_file_against_itself_is_inside_without_shift_or_error()
    {
        string file = Waveform("lv40-clean");

        Finished run = (await _place.Run("compare", file, "--reference", file, "--json")).Expect(0);

        using JsonDocument document = JsonDocument.Parse(run.Output);
        JsonElement root = document.RootElement;
        Assert.Equal("format", root.EnumerateObject().First().Name);
        Assert.Equal(1, root.GetProperty("format").GetInt32());
        Assert.Equal(0, root.GetProperty("shift").GetDouble());
        Assert.Equal(0, root.GetProperty("nrmse").GetDouble());
        Assert.True(root.GetProperty("inside").GetBoolean());
        Assert.All(
            root.GetProperty("scalars").EnumerateArray(),
            scalar => Assert.Equal(0, scalar.GetProperty("relative_error").GetDouble()));
        foreach (string name in (string[])["magnitude", "phase", "combined"])
        {
            Assert.Equal(0, root.GetProperty("sprague_geers").GetProperty(name).GetDouble());
        }

        foreach (string name in (string[])["adm", "fdm", "gdm"])
        {
            Assert.Equal(0, root.GetProperty("feature_selective").GetProperty(name).GetDouble());
            Assert.Equal("Excellent", root.GetProperty("feature_selective").GetProperty(name + "_word").GetString());
        }
    }

    [Fact]
    public async Task A_measured_record_is_held_against_its_clean_one()
    {
        Finished run = (await _place.Run(
            "compare", Waveform("hv650soft-measured"), "--reference", Waveform("hv650soft-clean"),
            "--settings", Settings("hv650soft"))).Expect(0);

        Assert.Contains("common practice, no source", run.Output, StringComparison.Ordinal);
        Assert.Contains("from on2's departure to the end of its ringing", run.Output, StringComparison.Ordinal);
        Assert.Contains("trr/chord-90-25@id_low-iL", run.Output, StringComparison.Ordinal);
        Assert.StartsWith("INSIDE the tolerances common-practice", run.Lines[^1], StringComparison.Ordinal);
        string[] channels = ["vgs_low ", "vds_low ", "id_low ", "vds_high * ", "vbus "];
        Assert.All(channels, name => Assert.Contains(
            run.Lines, line => line.StartsWith(name, StringComparison.Ordinal)));
    }

    [Fact]
    public async Task What_is_outside_is_named_and_ends_with_1()
    {
        string tolerances = Tolerances(
            "  - { quantity: ring_damping, within: 0.1 % }\n  - { quantity: i_off, within: 5 % }");

        Finished run = (await _place.Run(
            "compare", Waveform("hv650soft-measured"), "--reference", Waveform("hv650soft-clean"),
            "--settings", Settings("hv650soft"), "--tolerances", tolerances)).Expect(1);

        Assert.StartsWith("OUTSIDE the tolerances ours (a test)", run.Lines[^1], StringComparison.Ordinal);
        Assert.Contains("ring_damping", run.Lines[^1], StringComparison.Ordinal);
        Assert.DoesNotContain("i_off", run.Lines[^1], StringComparison.Ordinal);
    }

    [Fact]
    public async Task What_cannot_be_formed_is_outside_with_its_reason_and_null_in_JSON()
    {
        string file = Columns("lv40-clean", "t", "vgs_low", "vds_high");

        Finished run = (await _place.Run(
            "compare", file, "--reference", Waveform("lv40-clean"), "--json")).Expect(1);

        using JsonDocument document = JsonDocument.Parse(run.Output);
        Assert.False(document.RootElement.GetProperty("inside").GetBoolean());
        JsonElement trr = document.RootElement.GetProperty("scalars").EnumerateArray()
            .Single(scalar => scalar.GetProperty("quantity").GetString() == "trr");
        Assert.Equal(JsonValueKind.Null, trr.GetProperty("measured").ValueKind);
        Assert.Equal(JsonValueKind.Null, trr.GetProperty("relative_error").ValueKind);
        Assert.Contains("id_low is not measured", trr.GetProperty("reason").GetString(), StringComparison.Ordinal);
        Assert.Contains("trr", document.RootElement.GetProperty("outside").EnumerateArray().Select(x => x.GetString()));
    }

    [Fact]
    public async Task Two_files_without_a_common_channel_are_refused_with_both_lists()
    {
        string one = Columns("lv40-clean", "t", "vgs_low");
        string other = Columns("hv650soft-clean", "t", "vds_low", "vbus");

        Finished run = (await _place.Run("compare", one, "--reference", other)).Expect(2);

        Assert.Contains("no channel in common", run.Error, StringComparison.Ordinal);
        Assert.Contains("vds_low vbus", run.Error, StringComparison.Ordinal);
        Assert.Contains("--reference-channel", run.Error, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_reference_with_columns_of_other_names_is_mapped()
    {
        string file = Columns("lv40-clean", "t", "vgs_low", "vds_low", "id_low", "vds_high", "vbus");
        string[] lines = File.ReadAllLines(file);
        string renamed = _place.Path("renamed.csv");
        File.WriteAllLines(renamed, lines.Skip(1).Prepend("Time,G,CH1,CH2,CH3,CH4"));

        (await _place.Run(
            "compare", file, "--reference", renamed, "--reference-channel", "vgs_low=G",
            "--reference-channel", "vds_low=CH1", "--reference-channel", "id_low=CH2",
            "--reference-channel", "vds_high=CH3", "--reference-channel", "vbus=CH4")).Expect(0);
    }

    [Fact]
    public async Task A_wrong_tolerance_file_says_every_mistake_with_its_place()
    {
        string tolerances = Tolerances("  - { quantity: trrr, within: 1 % }\n  - { quantity: irm, wihtin: 1 % }");

        Finished run = (await _place.Run(
            "compare", Waveform("lv40-clean"), "--reference", Waveform("lv40-clean"),
            "--tolerances", tolerances)).Expect(2);

        Assert.Contains($"{tolerances}:5:", run.Error, StringComparison.Ordinal);
        Assert.Contains("did you mean trr?", run.Error, StringComparison.Ordinal);
        Assert.Contains($"{tolerances}:6:", run.Error, StringComparison.Ordinal);
        Assert.Contains("did you mean within?", run.Error, StringComparison.Ordinal);
    }

    [Fact]
    public async Task Without_a_reference_or_with_a_missing_one_it_is_said()
    {
        Assert.Contains(
            "--reference", (await _place.Run("compare", Waveform("lv40-clean"))).Expect(2).Error,
            StringComparison.Ordinal);
        Assert.Contains(
            "nowhere.csv",
            (await _place.Run("compare", Waveform("lv40-clean"), "--reference", "nowhere.csv")).Expect(2).Error,
            StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_wrong_interval_names_its_option()
    {
        Finished run = (await _place.Run(
            "compare", Waveform("lv40-clean"), "--reference", Waveform("lv40-clean"),
            "--reference-interval", "4 V")).Expect(2);

        Assert.StartsWith("--reference-interval: '4 V'", run.Error, StringComparison.Ordinal);
    }

    [Fact]
    public async Task The_schema_of_a_tolerance_file_is_printed()
    {
        using JsonDocument schema = JsonDocument.Parse((await _place.Run("schema", "tolerances")).Expect(0).Output);

        Assert.Equal("BenchRunner tolerances file", schema.RootElement.GetProperty("title").GetString());
    }

    private static string Waveform(string name) =>
        Workplace.Repository("tests", "reference", "waveforms", name + ".csv.gz");

    private string Tolerances(string limits)
    {
        string file = _place.Path("tolerances.yaml");
        File.WriteAllText(file, $"format: 1\ntolerances: ours\nbasis: a test\nlimits:\n{limits}\n");
        return file;
    }

    /// <summary>The stated errors of a measured-like record as a settings file.</summary>
    private string Settings(string scenario)
    {
        using JsonDocument chain = JsonDocument.Parse(File.ReadAllBytes(
            Workplace.Repository("tests", "reference", "waveforms", scenario + "-measured.json")));
        string file = _place.Path("settings.yaml");
        File.WriteAllLines(file, chain.RootElement.GetProperty("channels").EnumerateObject().Select(channel =>
            string.Create(
                CultureInfo.InvariantCulture,
                $"  {channel.Name}: {{ gain: {channel.Value.GetProperty("gain").GetDouble()}, "
                    + $"offset: {channel.Value.GetProperty("offset").GetDouble()} "
                    + $"{(channel.Name.StartsWith('i') ? 'A' : 'V')}, "
                    + $"skew: {channel.Value.GetProperty("skew_s").GetDouble()} s }}")).Prepend("channels:"));
        return file;
    }

    /// <summary>Some columns of a reference waveform as a file of its own.</summary>
    private string Columns(string name, params string[] columns)
    {
        using var reader = new StreamReader(
            new GZipStream(File.OpenRead(Waveform(name)), CompressionMode.Decompress));
        string[] header = reader.ReadLine()!.Split(',');
        int[] kept = [.. columns.Select(column => Array.IndexOf(header, column))];
        string file = _place.Path(name + ".csv");
        using StreamWriter writer = File.CreateText(file);
        writer.WriteLine(string.Join(',', columns));
        while (reader.ReadLine() is { } line)
        {
            string[] cells = line.Split(',');
            writer.WriteLine(string.Join(',', kept.Select(i => cells[i])));
        }

        return file;
    }
}
