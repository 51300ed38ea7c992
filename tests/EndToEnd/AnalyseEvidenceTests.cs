using System.Text.Json;

namespace EndToEnd;

/// <summary><c>analyse</c> of captures that the evidence holds: what it says is what the run stored.</summary>
[Trait("kind", "slow")]
public sealed class AnalyseEvidenceTests(StoredCaptures stored) : IClassFixture<StoredCaptures>
{
    private readonly Workplace _place = stored.Place;

    [Fact]
    public async Task Every_value_of_every_capture_is_the_stored_one_to_the_last_bit()
    {
        int compared = 0;
        foreach (object[] capture in _place.Rows(
            "select run, operating_point, capture, samples from captures where operating_point in ('half', 'rated')"))
        {
            string run = (string)capture[0], point = (string)capture[1];
            JsonElement waveform = Assert.Single(await Waveforms(
                "--capture", $"{capture[2]}", "--run", run, "--operating-point", point));
            Assert.Equal(
                (StoredCaptures.Device, run, point, (long)capture[2], (long)capture[3]),
                (Text(waveform, "device"), Text(waveform, "run"), Text(waveform, "operating_point"),
                    waveform.GetProperty("capture").GetInt64(), waveform.GetProperty("samples").GetInt64()));
            Dictionary<(string, string), (double?, string?)> analysed = waveform.GetProperty("quantities")
                .EnumerateArray()
                .ToDictionary(
                    one => (Text(one, "quantity")!, Text(one, "definition")!),
                    one => (Number(one, "value"), Text(one, "reason")));
            foreach (object[] value in _place.Rows(
                $"select quantity, definition, value, reason from capture_values where run = '{run}' "
                    + $"and operating_point = '{point}' and capture = {capture[2]}"))
            {
                (double? number, string? reason) = analysed[((string)value[0], (string)value[1])];
                Assert.Equal(value[2] as double?, number);
                Assert.Equal(value[3] as string, reason);
                compared++;
            }

            Assert.Equal(
                Assert.Single(_place.Rows(
                    $"select findings, not_evaluated from captures where run = '{run}' and operating_point = '{point}' "
                        + $"and capture = {capture[2]}")).Select(text => Compact((string)text)),
                ((string[])["findings", "not_evaluated"])
                    .Select(name => Compact(waveform.GetProperty(name).GetRawText())));
        }

        Assert.True(compared > 200, $"only {compared} values were compared");
    }

    [Fact]
    public async Task A_number_held_at_several_points_gives_each_of_the_newest_run_that_has_it()
    {
        JsonElement[] newest = await Waveforms("--capture", "2");
        JsonElement[] older = await Waveforms("--capture", "2", "--run", stored.Runs[0]);

        Assert.Equal([("half", stored.Runs[1])], newest.Select(Place));
        Assert.Equal([("half", stored.Runs[0]), ("rated", stored.Runs[0])], older.Select(Place));

        Finished said = (await Analyse("--capture", "2")).Expect(0);
        Assert.Contains($"this is the newest, {stored.Runs[1]}", said.Error, StringComparison.Ordinal);
        Assert.Contains(stored.Runs[0], said.Error, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("zero", false)]
    [InlineData("proving-before", true)]
    [InlineData("proving-after", true)]
    public async Task Captures_of_the_bench_itself_are_analysed_where_they_are_named(string point, bool hasTrain)
    {
        JsonElement waveform = Assert.Single(await Waveforms("--capture", "1", "--operating-point", point));

        double?[] values = [.. waveform.GetProperty("quantities").EnumerateArray().Select(one => Number(one, "value"))];
        Assert.Equal(hasTrain, values.Any(value => value is not null));
        // A zero capture has no verdict: nothing was evaluated, and nothing is claimed.
        Assert.Equal(
            !hasTrain,
            waveform.GetProperty("not_evaluated").EnumerateArray().Any(one => one.GetString() == "two-pulses"));
        Assert.Equal(0, waveform.GetProperty("findings").GetArrayLength());
    }

    [Fact]
    public async Task Settings_replace_what_the_run_knew()
    {
        string settings = _place.Path("settings.yaml");
        File.WriteAllText(settings, "channels: { id_low: { gain: 2, offset: 0 A } }\n");

        double ByRun(JsonElement waveform) => waveform.GetProperty("quantities").EnumerateArray()
            .Single(one => Text(one, "quantity") == "i_off").GetProperty("value").GetDouble();
        JsonElement replaced = Assert.Single(await Waveforms("--capture", "2", "--settings", settings));
        JsonElement own = Assert.Single(await Waveforms("--capture", "2"));

        // The fake's current probe has a gain near 1; stating 2 halves the current.
        Assert.InRange(ByRun(replaced) / ByRun(own), 0.48, 0.52);
        Assert.True(replaced.GetProperty("not_evaluated").GetArrayLength() > 1, "a verdict of the run is not its own");
    }

    [Fact]
    public async Task Every_definition_is_formed_on_demand() =>
        Assert.True(
            Assert.Single(await Waveforms("--capture", "1", "--every-definition")).GetProperty("quantities")
                .GetArrayLength() > 60);

    [Fact]
    public async Task A_picture_of_one_capture_is_drawn_and_of_several_refused_with_the_choices()
    {
        string[] capture = ["--capture", "2", "--run", stored.Runs[0], "--plot", "capture.svg"];

        (await Analyse([.. capture, "--operating-point", "rated"])).Expect(0);
        Assert.Contains("rated, capture 2", File.ReadAllText(_place.Path("capture.svg")), StringComparison.Ordinal);

        Finished refused = (await Analyse(capture)).Expect(2);
        Assert.Contains("--operating-point: half, rated", refused.Error, StringComparison.Ordinal);
    }

    [Fact]
    public async Task Samples_at_the_rails_of_a_stored_capture_are_marked()
    {
        using Workplace place = new();
        string bench = place.FakeBenchFile("{ seed: 1, pace: 5, faults: [clipped-range] }");
        await place.Run("run", place.OnePoint("half"), "--device", StoredCaptures.Device, "--bench", bench);
        object[] clipped = place.Rows(
            "select capture, json_extract(findings, '$[0].channel') from captures "
                + "where json_extract(findings, '$[0].criterion') = 'not-clipped' and operating_point = 'half'")[0];

        (await place.Run(
            "analyse", "--device", StoredCaptures.Device, "--capture", $"{clipped[0]}", "--plot", "clipped.svg"))
            .Expect(0);

        string[] marked =
        [
            .. System.Xml.Linq.XDocument.Load(place.Path("clipped.svg")).Descendants()
                .Where(one => one.Attribute("class")?.Value == "clipped")
                .Select(one => one.Parent!.Attribute("data-channel")!.Value).Distinct(),
        ];
        Assert.Contains((string)clipped[1], marked);
    }

    [Theory]
    [InlineData("--capture 9", "has no capture 9; expected one of zero 1; proving-before 1; half 1 to 2")]
    [InlineData("--capture 1 --operating-point full", "has no capture 1 at 'full'; expected one of zero 1")]
    [InlineData("--capture one", "--capture: 'one'; expected a whole number from 1")]
    [InlineData("--capture 0", "--capture: '0'; expected a whole number from 1")]
    [InlineData("--capture 1 --run 7", "has no run '7'; expected one of")]
    [InlineData("--capture 1 --interval 1ns", "--interval is about waveform files")]
    [InlineData("--capture 1 train.csv", "--evidence names a stored capture; give waveform files or a stored capture")]
    [InlineData("--run 7", "name waveform files, or a stored capture by --device and --capture")]
    public async Task What_does_not_name_a_capture_is_refused_and_says_what_does(string arguments, string message)
    {
        Finished refused = (await Analyse(arguments.Split(' '))).Expect(2);

        Assert.Contains(message, refused.Error, StringComparison.Ordinal);
        Assert.Empty(refused.Output);
    }

    [Fact]
    public async Task An_unknown_device_and_a_missing_file_are_named()
    {
        Finished device = (await _place.Run(
            "analyse", "--evidence", _place.Evidence, "--device", "W1200-0009", "--capture", "1")).Expect(2);
        Finished file = (await _place.Run(
            "analyse", "--evidence", "nowhere.db", "--device", "W1200-0001", "--capture", "1")).Expect(2);

        Assert.Contains($"no capture of 'W1200-0009'; expected one of {StoredCaptures.Device}", device.Error,
            StringComparison.Ordinal);
        Assert.Contains("nowhere.db: there is no such evidence file", file.Error, StringComparison.Ordinal);
    }

    private Task<Finished> Analyse(params string[] more) =>
        _place.Run(["analyse", "--evidence", _place.Evidence, "--device", StoredCaptures.Device, .. more]);

    private async Task<JsonElement[]> Waveforms(params string[] more)
    {
        Finished said = (await Analyse([.. more, "--json"])).Expect(0);
        using JsonDocument document = JsonDocument.Parse(said.Output);
        return [.. document.RootElement.GetProperty("waveforms").EnumerateArray().Select(one => one.Clone())];
    }

    private static (string?, string?) Place(JsonElement waveform) =>
        (Text(waveform, "operating_point"), Text(waveform, "run"));

    private static string Compact(string json)
    {
        using JsonDocument document = JsonDocument.Parse(json);
        return JsonSerializer.Serialize(document.RootElement);
    }

    private static string? Text(JsonElement of, string name) => of.GetProperty(name).GetString();

    private static double? Number(JsonElement of, string name) =>
        of.GetProperty(name) is { ValueKind: JsonValueKind.Number } number ? number.GetDouble() : null;
}
