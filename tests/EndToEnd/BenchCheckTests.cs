using System.Globalization;
using System.Text.Json;
using BenchRunner.Safety.Locks;

namespace EndToEnd;

/// <summary><c>bench check</c>: shows each instrument, disturbs no run, and its exit code says whether a run may
/// begin.</summary>
public sealed class BenchCheckTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_sound_bench_is_fit_and_every_instrument_is_shown()
    {
        Finished check = (await _place.Run("bench", "check", "--json")).Expect(0);

        using JsonDocument shown = JsonDocument.Parse(check.Output);
        Assert.True(shown.RootElement.GetProperty("fit").GetBoolean());
        JsonElement[] instruments = [.. shown.RootElement.GetProperty("instruments").EnumerateArray()];
        Assert.Equal(
            ["voltmeter", "interlock", "supply", "pulser", "scope"],
            instruments.Select(i => i.GetProperty("role").GetString()));
        Assert.All(instruments, i =>
        {
            Assert.Contains("FAKEBENCH", i.GetProperty("identity").GetString(), StringComparison.Ordinal);
            double median = i.GetProperty("latency").GetProperty("p50").GetDouble();
            Assert.InRange(median, double.Epsilon, i.GetProperty("latency").GetProperty("max").GetDouble());
            Assert.DoesNotContain(i.GetProperty("findings").EnumerateArray(), f => f.GetProperty("unfit").GetBoolean());
        });
        Assert.Equal(0, instruments[0].GetProperty("self_test").GetInt64());
        Assert.Equal(JsonValueKind.Null, instruments[2].GetProperty("self_test").ValueKind);
    }

    [Theory]
    [InlineData("wrong-identity", "does not match the identity")]
    [InlineData("emergency-stop@seconds:0", "the emergency stop is pressed")]
    public async Task An_unfit_bench_is_said_with_the_reason(string fault, string reason)
    {
        Finished check = (await _place.Run(
            "bench", "check", "--bench", _place.FakeBenchFile($"{{ seed: 1, pace: 5, faults: ['{fault}'] }}"))).Expect(5);

        Assert.Contains(reason, check.Output, StringComparison.Ordinal);
        Assert.Contains("NOT FIT", check.Output, StringComparison.Ordinal);
    }

    [Fact]
    public async Task What_an_earlier_user_left_in_a_queue_is_shown_and_makes_nothing_unfit()
    {
        Finished check = (await _place.Run(
            "bench", "check", "--bench", _place.FakeBenchFile("{ seed: 1, pace: 5, faults: [error-queue-full] }"))).Expect(0);

        Assert.Contains("error queue: -222", check.Output, StringComparison.Ordinal);
        Assert.Contains("error queue: -350", check.Output, StringComparison.Ordinal);
    }

    [Fact]
    public async Task The_document_names_all_that_it_shows()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        Finished check = (await _place.Run("bench", "check", "--bench", bench.File, "--json")).Expect(0);

        using JsonDocument shown = JsonDocument.Parse(check.Output);
        Assert.Equal(["format", "bench", "fit", "latch", "instruments"], Names(shown.RootElement));
        Assert.Equal(JsonValueKind.Null, shown.RootElement.GetProperty("latch").ValueKind);
        foreach (JsonElement instrument in shown.RootElement.GetProperty("instruments").EnumerateArray())
        {
            Assert.Equal(
                ["role", "link", "identity", "errors", "self_test", "latency", "settings", "findings"], Names(instrument));
            Assert.Equal(["p50", "max"], Names(instrument.GetProperty("latency")));
            Assert.Equal(JsonValueKind.Array, instrument.GetProperty("errors").ValueKind);
            Assert.All(
                instrument.GetProperty("settings").EnumerateObject(),
                setting => Assert.Equal(JsonValueKind.String, setting.Value.ValueKind));
            Assert.All(
                instrument.GetProperty("findings").EnumerateArray(),
                finding => Assert.Equal(["unfit", "message"], Names(finding)));
        }
    }

    [Theory]
    [InlineData("scope", "INPut1:ATTenuation?", "INPut1:ATTenuation 42", "input 1 takes its probe for 42:1")]
    [InlineData("supply", "SOURce:VOLTage:PROTection?", "SOURce:VOLTage:PROTection 950",
        "its over-voltage protection is at 950 V, above the envelope of 900 V")]
    [InlineData("supply", "OUTPut?", "OUTPut ON", "its output is on")]
    public async Task A_setting_that_endangers_a_run_makes_the_bench_unfit_and_is_left_alone(
        string role, string question, string setting, string says)
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        string sound = await bench.Ask(role, question);
        string set = await bench.Ask(role, question, setting);
        Assert.NotEqual(sound, set);

        Finished check = (await _place.Run("bench", "check", "--bench", bench.File)).Expect(5);

        Assert.Contains($"UNFIT: {says}", check.Output, StringComparison.Ordinal);
        Assert.EndsWith("NOT FIT", check.Output.TrimEnd(), StringComparison.Ordinal);
        Assert.Equal(set, await bench.Ask(role, question));
    }

    [Fact]
    public async Task A_hand_at_an_instrument_during_the_check_makes_the_bench_unfit()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using var end = new CancellationTokenSource();
        Task hand = Task.Run(
            async () =>
            {
                // Another value each time, so that no two readings of the check see the same one.
                for (int n = 0; !end.IsCancellationRequested; n++)
                {
                    await bench.Ask("pulser", "*IDN?", string.Create(
                        CultureInfo.InvariantCulture, $"SOURce:VOLTage:LEVel:IMMediate:HIGH {15 + (0.001 * (n % 4000)):0.000}"));
                }
            },
            TestContext.Current.CancellationToken);

        Finished check = (await _place.Run("bench", "check", "--bench", bench.File)).Expect(5);
        await end.CancelAsync();
        await hand;

        Assert.Contains("UNFIT: its gate-on went from ", check.Output, StringComparison.Ordinal);
        Assert.Contains("somebody else controls it", check.Output, StringComparison.Ordinal);
    }

    [Fact]
    public async Task An_instrument_that_another_controller_has_locked_is_said_to_be()
    {
        using HislipBench bench = await HislipBench.Start(_place);
        await bench.LockSupply();

        Finished check = (await _place.Run("bench", "check", "--bench", bench.File)).Expect(5);

        Assert.Contains("locked by another controller", check.Output, StringComparison.Ordinal);
        Assert.Contains("supply at ", check.Output, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_bench_that_a_run_holds_is_not_disturbed()
    {
        using LabBench lab = await LabBench.Start(_place);
        using BenchLock? held = BenchLock.TryTake(lab.File, TimeProvider.System.GetUtcNow(), out _);

        Finished check = (await _place.Run("bench", "check", "--bench", lab.File)).Expect(5);

        Assert.Contains($"in use by process {Environment.ProcessId}", check.Error, StringComparison.Ordinal);
    }

    private static string[] Names(JsonElement of) => [.. of.EnumerateObject().Select(one => one.Name)];
}
