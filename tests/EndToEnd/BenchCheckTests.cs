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
    public async Task A_bench_that_a_run_holds_is_not_disturbed()
    {
        using LabBench lab = await LabBench.Start(_place);
        using BenchLock? held = BenchLock.TryTake(lab.File, TimeProvider.System.GetUtcNow(), out _);

        Finished check = (await _place.Run("bench", "check", "--bench", lab.File)).Expect(5);

        Assert.Contains($"in use by process {Environment.ProcessId}", check.Error, StringComparison.Ordinal);
    }
}
