using BenchRunner.Soak.Mixes;

namespace BenchRunner.Soak.Tests;

/// <summary>Each flaw of the fake bench that a criterion of validity is for, through a whole run of one operating point in
/// simulated time: the criterion, its class, the outcome and the exit code; the bus down at the end and the evidence
/// consistent.</summary>
/// <remarks>Train 1 is the proving train: a flaw that is there from the start meets it first. Some go the same road with
/// real processes (EndToEnd).</remarks>
public sealed class CriterionTrialTests : IDisposable
{
    private const string Low = "half", High = "rated";

    private readonly Trials _trials = new();

    public void Dispose() => _trials.Dispose();

    [Theory]
    [InlineData("short-record", 3, "complete")]
    // The next range is the smaller one that the weak swing asked for: the full swing clips it.
    [InlineData("weak-signal", 4, "not-clipped", "range-used")]
    [InlineData("short-pulse", 3, "two-pulses")]
    [InlineData("short-gap", 3, "settled")]
    [InlineData("bank-weak", 3, "bus-droop")]
    // A bus that is 2 % low charges the inductor to 2.5 % less.
    [InlineData("supply-sags", 3, "bus-within", "current-within")]
    [InlineData("inductor-off", 3, "current-within")]
    // Three in a row, then a zero capture with the new offset.
    [InlineData("probe-drift", 5, "baseline")]
    public void A_flaw_that_passes_or_is_corrected_costs_captures_and_changes_no_outcome(
        string fault, long taken, params string[] criteria)
    {
        Ended run = Run(fault, Low, exitCode: 0);

        Assert.Equal([.. criteria.Select(criterion => $"{Low} {criterion} retry")], run.Findings);
        Assert.Equal($"accepted {taken} 2", run.Outcome);
        Assert.Equal("", run.Trips);
        run.AssertDown(2);
    }

    [Fact]
    public void A_drifted_probe_gets_a_new_zero_capture() =>
        Assert.Equal(2, Run("probe-drift", Low, exitCode: 0).ZeroCaptures);

    [Theory]
    [InlineData("long-pulse", Low, Low, "two-pulses", "a pulse longer than set")]
    [InlineData("high-off-level", Low, Low, "gate-levels", "off at -2.9")]
    [InlineData("high-off-level@fire:1", Low, "proving-before", "gate-levels", "off at -2.9")]
    [InlineData("inductor-far-off", Low, "proving-before", "bus-agrees", "another inductor")]
    // Its flux at 20 A is still linear.
    [InlineData("saturating-inductor", High, High, "ramp-straightness", "the inductor saturates")]
    public void A_bench_that_is_not_what_it_was_set_to_is_stopped(
        string fault, string point, string at, string criterion, string reason)
    {
        Ended run = Run(fault, point, exitCode: 4);

        Assert.Contains($"{at} {criterion} stop", run.Findings);
        Assert.StartsWith("stopped", run.Outcome, StringComparison.Ordinal);
        Assert.Contains(criterion, run.Reason, StringComparison.Ordinal);
        Assert.Contains(reason, run.Reason, StringComparison.Ordinal);
        Assert.Contains(reason, run.Trips, StringComparison.Ordinal);
        run.AssertDown(1);
    }

    [Fact]
    public void A_place_held_off_that_turns_on_is_the_device_s_fault_found_before_high_voltage()
    {
        Ended run = Run("gate-lifts", Low, exitCode: 1);

        Assert.Equal(["proving-before high-side-off stop"], run.Findings);
        Assert.Equal("rejected 0 0", run.Outcome);
        Assert.Contains("the switch held off turns on", run.Reason, StringComparison.Ordinal);
        Assert.Equal("", run.Trips);
        run.AssertDown(1);
    }

    [Theory]
    // One capture is valid before the level sags; a device is not brought to high voltage on a bench that does so.
    [InlineData("weak-gate-driver", "stopped 8 1", 2, "half gate-levels retry", "proving-after gate-levels retry")]
    [InlineData("weak-gate-driver@fire:1", "stopped 0 0", 1, "proving-before gate-levels retry")]
    public void A_gate_driver_that_stays_weak_ends_the_session_as_an_unfit_bench(
        string fault, string outcome, int timesDown, params string[] findings)
    {
        Ended run = Run(fault, Low, exitCode: 5);

        Assert.Equal(findings, run.Findings);
        Assert.Equal(outcome, run.Outcome);
        Assert.Contains("3 trains and none that could be judged", run.Reason, StringComparison.Ordinal);
        run.AssertDown(timesDown);
    }

    [Fact]
    public void A_probe_whose_factor_changed_on_the_scope_fires_no_train_more()
    {
        Ended run = Run("probe-factor-changes@fire:2", Low, exitCode: 4);

        // The scope is asked before each train: the second one at the point was not fired.
        Assert.Equal("stopped 1 1", run.Outcome);
        Assert.Contains("the attenuation of id_low (input 3) is 10 where 1 was set", run.Reason, StringComparison.Ordinal);
        Assert.Contains("attenuation", run.Trips, StringComparison.Ordinal);
        run.AssertDown(1);
    }

    [Theory]
    [InlineData("device-dies", "rejected 2 2", "did not survive its measurement")]
    [InlineData("device-dies@fire:2", "rejected 1 1", "the bus is at")]
    public void A_device_that_dies_is_rejected_and_the_bank_that_emptied_at_once_is_not_believed_empty(
        string fault, string outcome, string reason)
    {
        // The supply is set to 400 V and cannot charge the bus: what stops above 60 V trips.
        Ended run = Run(fault, Low, exitCode: 4);

        Assert.Equal(outcome, run.Outcome);
        Assert.Contains(reason, run.Reason, StringComparison.Ordinal);
        Assert.Contains("a position is shorted", run.Reason, StringComparison.Ordinal);
        Assert.Contains("the bus was not proved down", run.Reason, StringComparison.Ordinal);
        Assert.Contains("a position is shorted", run.Trips, StringComparison.Ordinal);
        Assert.Equal(0, run.DownAfterTrip);
    }

    /// <summary>A run of one point, 2 valid captures of at most 8; held to the soak's own judgement beside its exit
    /// code.</summary>
    private Ended Run(string fault, string point, int exitCode)
    {
        Ended? run = null;
        int code = -1;
        Judged judged = _trials.Of(
            Trials.Alone([fault]) with { Points = [point], Captures = (2, 8) },
            facts =>
            {
                string[] wrong = [.. Judgement.Of(facts)];
                (run, code) = (new Ended(facts), facts.ExitCode);
                return wrong;
            });
        Assert.True(judged.Wrong.Length == 0, judged.Wrong);
        Assert.Equal(exitCode, code);
        return run!;
    }

    /// <summary>What stands in the evidence of a run that has ended.</summary>
    private sealed class Ended(Facts facts)
    {
        /// <summary>Operating point, criterion and class of each kind of finding.</summary>
        public IReadOnlyList<string> Findings { get; } =
        [
            .. facts.Rows(
                "select distinct operating_point || ' ' || json_extract(finding.value, '$.criterion') || ' ' "
                    + "|| json_extract(finding.value, '$.class') from captures, json_each(captures.findings) finding "
                    + "order by 1").Select(row => (string)row[0]),
        ];

        public string Outcome { get; } = facts.Ask<string>(
            "select outcome || ' ' || captures_taken || ' ' || captures_valid from device_outcomes");

        public string Reason { get; } = facts.Ask<string>("select coalesce(reason, '') from device_outcomes");

        public string Trips { get; } =
            facts.Ask<string>("select coalesce(group_concat(message), '') from events where kind = 'trip'");

        public long ZeroCaptures { get; } =
            facts.Ask<long>("select count(*) from captures where operating_point = 'zero'");

        public long DownAfterTrip { get; } = facts.Ask<long>(
            "select count(*) from events "
                + "where kind = 'bus-down' and at > (select min(at) from events where kind = 'trip')");

        private readonly long _down = facts.Ask<long>("select count(*) from events where kind = 'bus-down'");

        private readonly long _notDown =
            facts.Ask<long>("select count(*) from events where kind = 'bus-not-proved-down'");

        public void AssertDown(long times) => Assert.Equal((times, 0), (_down, _notDown));
    }
}
