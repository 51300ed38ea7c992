using System.Text.RegularExpressions;
using BenchRunner.Soak.Mixes;

namespace BenchRunner.Soak.Tests;

/// <summary>Faults, each alone through a whole run in simulated time: the run ends as docs/faults.md says, and the soak's own
/// judgement finds nothing wrong beside it. Some go the same road with real processes (EndToEnd).</summary>
public sealed class FaultTrialTests : IDisposable
{
    private readonly Trials _trials = new();

    public void Dispose() => _trials.Dispose();

    [Theory]
    [InlineData("F03", "supply/half-open@volts:200", "the supply gives no sign of life")]
    [InlineData("F04", "supply/drip@volts:200", "the supply's word is in doubt")]
    [InlineData("F05", "supply/late-reply@volts:200", "the supply's word is in doubt")]
    [InlineData("F05", "interlock/late-reply@volts:200", "the watch lost sight of the bench")]
    [InlineData("F10", "supply/overload@volts:200", "with no number")]
    [InlineData("F11", "interlock/garbage@volts:200", "the watch lost sight of the bench")]
    [InlineData("F12", "interlock/wrong-end@volts:200", "the watch lost sight of the bench")]
    [InlineData("F17", "supply/queue-overflow", "-350")]
    [InlineData("F17", "pulser/queue-overflow", "-350")]
    [InlineData("F20", "reading-sticks", "the bus was not proved down")]
    [InlineData("F27", "supply/reboot", "the supply's word is in doubt")]
    [InlineData("F27", "pulser/reboot", "the pulser gives no sign of life")]
    [InlineData("F28", "second-controller", "above the 420.0 V that the permit allows")]
    [InlineData("F30", "bus-stays-up", "the bus was not proved down")]
    [InlineData("F31", "bleeder-weak", "the bus was not proved down")]
    [InlineData("F36", "probe-off", "bus-agrees")]
    [InlineData("F36", "voltmeter-open@volts:300", "the voltmeter fell")]
    [InlineData("F37", "supply-overshoots", "above the 420.0 V that the permit allows")]
    [InlineData("F38", "arcing", "the interlock loop is open")]
    [InlineData("driver supply lost", "driver-lost", "the gate drivers may have lost their supply")]
    [InlineData("driver supply lost", "driver-lost@volts:300", "the gate drivers may have lost their supply")]
    [InlineData("fuse opens", "fuse-opens", "where 400 V was set")]
    [InlineData("gate stuck on", "gate-stuck-on", "vgs_low is still on at the end of the record")]
    [InlineData("probes swapped", "probes-swapped", "bus-agrees: vds_low")]
    [InlineData("pulser fires on arm", "fires-on-arm", "pulser")]
    [InlineData("pulser fires twice", "fires-twice", "counts 2 trains where one was fired")]
    public void A_bench_at_fault_trips_and_the_device_is_not_blamed(string row, string fault, string why) =>
        Ends(row, fault, 4, "Stopped", why);

    [Fact]
    public void A_bus_that_rises_after_its_proof_is_said_trips_and_is_brought_down_once_more()
    {
        // Before the proving train's permit is granted, or under it: the bank does not wait for either.
        Judged judged = Ends("bus rises", "bus-rises", 4, "Stopped", "the bus ");

        Assert.Contains(judged.Log, line => Regex.IsMatch(
            line, "TRIP: the bus (rose to .* after it was proved down|is at .* above the .* that the permit allows)"));
        Assert.Contains(
            judged.Log.SkipWhile(line => !line.Contains("TRIP", StringComparison.Ordinal)),
            line => line.Contains("bus measured at", StringComparison.Ordinal));
    }

    [Theory]
    [InlineData("F16", "supply/hardware-error")]
    [InlineData("F16", "interlock/hardware-error")]
    public void An_instrument_that_says_its_hardware_is_broken_is_refused_before_anything_is_energised(
        string row, string fault) => Ends(row, fault, 5, null, "-240");

    [Theory]
    [InlineData("F17", "scope/queue-overflow", "-350")]
    [InlineData("F23", "never-completes", "an acquisition is going on")]
    public void A_scope_that_cannot_go_on_ends_the_run_without_a_trip(string row, string fault, string why) =>
        Ends(row, fault, 5, "Stopped", why);

    [Theory]
    [InlineData("F35", "desaturates", 4, "desaturated: vds_low")]
    [InlineData("dies in the last proving train", "device-dies@fire:8", 1, "did not survive its measurement")]
    public void A_device_at_fault_is_rejected(string row, string fault, int exitCode, string why) =>
        Ends(row, fault, exitCode, "Rejected", why);

    [Theory]
    [InlineData("F24", "wrong-scale", "vgs_low is missing from the record")]
    [InlineData("F15", "pulser/reply-lost", "one train was fired though its reply was lost")]
    public void What_spoils_one_train_costs_no_more_than_that(string row, string fault, string said)
    {
        Judged judged = Ends(row, fault, 0, "Accepted", "");

        Assert.Contains(judged.Log, line => line.Contains(said, StringComparison.Ordinal));
    }

    [Fact]
    public void F42_a_wall_clock_that_is_set_back_changes_no_wait_and_no_order()
    {
        Judged judged = _trials.Of(
            Trials.Alone([]) with { Stepped = (1.5, -86_400) }, facts => [$"{facts.ExitCode}", .. Judgement.Of(facts)]);

        Assert.Equal("0", judged.Wrong);
    }

    private Judged Ends(string row, string fault, int exitCode, string? outcome, string why)
    {
        (int Code, string? Outcome, string? Why) end = default;
        Judged judged = _trials.Under([fault], facts =>
        {
            end = (facts.ExitCode, facts.Report?.Decision.Outcome.ToString(),
                facts.Report is { } report ? report.Decision.Reason : facts.Thrown?.Message);
            return Judgement.Of(facts);
        });

        Assert.True(judged.Wrong.Length == 0, $"{row}: {judged.Wrong}");
        Assert.Equal((exitCode, outcome), (end.Code, end.Outcome));
        Assert.Contains(why, end.Why ?? "", StringComparison.Ordinal);
        return judged;
    }
}
