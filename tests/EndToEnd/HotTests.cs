using System.Globalization;
using BenchRunner.Evidence.Audits;

namespace EndToEnd;

/// <summary>A device on a plate that is heated, through a whole run: the shipped hot sequence at a lower temperature and
/// with a shorter soak.</summary>
[Trait("kind", "slow")]
public sealed class HotTests : IDisposable
{
    private const string Point = "half-hot";

    private readonly Workplace _place = new Workplace().WithPatience(TimeSpan.FromMinutes(5));

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_plate_that_drifts_is_found_waited_for_and_the_capture_taken_again()
    {
        Finished run = await Run("40 degC", "['plate-drifts@fire:2']");

        run.Expect(0);
        Assert.Equal("accepted 3 2", _place.Ask<string>(
            "select outcome || ' ' || captures_taken || ' ' || captures_valid from device_outcomes"));
        Assert.Equal(
            "2 temperature-within retry", _place.Ask<string>(
                "select group_concat(capture || ' ' || json_extract(finding.value, '$.criterion') || ' ' || "
                    + "json_extract(finding.value, '$.class')) from captures, json_each(captures.findings) finding"));

        // The draught takes 6 K; the tolerance is 3 K.
        double[] plate =
        [
            .. _place.Rows($"select temperature from captures where operating_point = '{Point}' order by capture")
                .Select(row => (double)row[0]),
        ];
        Assert.Equal(3, plate.Length);
        Assert.InRange(plate[0], 37, 43);
        Assert.InRange(plate[1], 33, 37);
        Assert.InRange(plate[2], 37, 43);

        // A plate takes its time: heated with the bus down, and off at the end, where it is still warm.
        Assert.Equal(
            "bus-down,soak-started,soak-done,point-started,bus-down,bus-down", _place.Ask<string>(
                "select group_concat(kind) from (select kind from events where kind in ('bus-down', 'soak-started', "
                    + "'soak-done', 'point-started') order by at)"));
        AssertPlateIsSaid(run, isHot: false);
        Assert.Empty(EvidenceAudit.Verify(_place.Evidence, cancel: TestContext.Current.CancellationToken).Problems);
    }

    [Fact]
    public async Task A_plate_above_60_degC_is_called_hot_at_the_end()
    {
        Finished run = await Run("90 degC", "[]");

        run.Expect(0);
        Assert.Contains("hot. It stays hot after the run", run.Output, StringComparison.Ordinal);
        AssertPlateIsSaid(run, isHot: true);
    }

    private static void AssertPlateIsSaid(Finished run, bool isHot)
    {
        string said = run.Output.Split('\n').Single(line => line.StartsWith("the plate is at", StringComparison.Ordinal));
        double degC = double.Parse(said.Split(' ')[4], CultureInfo.InvariantCulture);
        Assert.Equal(isHot, degC > 60);
        Assert.Equal(isHot, said.EndsWith("HOT", StringComparison.Ordinal));
    }

    private async Task<Finished> Run(string temperature, string faults)
    {
        string text = await File.ReadAllTextAsync(Workplace.Repository("sequences", "benches", "hot-plate.yaml"));
        Assert.Contains("fake: { seed: 1, pace: 5 }", text, StringComparison.Ordinal);
        Directory.CreateDirectory(_place.Path("benches"));
        string bench = _place.Path("benches/hot-plate.yaml");
        await File.WriteAllTextAsync(bench, text.Replace(
            "fake: { seed: 1, pace: 5 }", $"fake: {{ seed: 1, pace: 5, faults: {faults} }}", StringComparison.Ordinal));
        string sequence = _place.OnePoint(
            Point, "winch-drive-hot.yaml", ("temperature: 125 degC", $"temperature: {temperature}"),
            ("soak: 120 s", "soak: 2 s"));
        return await _place.Run("run", sequence, "--device", "W1200-0001", "--bench", bench);
    }
}
