using BenchRunner.Evidence.Audits;

namespace EndToEnd;

/// <summary>Each flaw of the fake bench that a criterion of validity is for, through a whole run of one operating point:
/// the criterion, its class, the outcome and the exit code; the bus down at the end and the evidence consistent.</summary>
/// <remarks>Train 1 is the proving train: a flaw that is there from the start meets it first.</remarks>
[Trait("kind", "slow")]
public sealed class CriterionTests : IDisposable
{
    private const string Low = "half", High = "rated";

    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Theory]
    [InlineData("short-record", Low, 3, "complete")]
    // The next range is the smaller one that the weak swing asked for: the full swing clips it.
    [InlineData("weak-signal", Low, 4, "not-clipped", "range-used")]
    [InlineData("short-pulse", Low, 3, "two-pulses")]
    [InlineData("short-gap", Low, 3, "settled")]
    [InlineData("bank-weak", Low, 3, "bus-droop")]
    // A bus that is 2 % low charges the inductor to 2.5 % less.
    [InlineData("supply-sags", Low, 3, "bus-within", "current-within")]
    [InlineData("inductor-off", Low, 3, "current-within")]
    // Three in a row, then a zero capture with the new offset.
    [InlineData("probe-drift", Low, 5, "baseline")]
    public async Task A_flaw_that_passes_or_is_corrected_costs_captures_and_changes_no_outcome(
        string fault, string point, long taken, params string[] criteria)
    {
        (await Run(fault, point)).Expect(0);

        Assert.Equal([.. criteria.Select(criterion => $"{point} {criterion} retry")], Findings());
        Assert.Equal($"accepted {taken} 2", Outcome());
        Assert.Equal("", Trips());
        AssertDownAndConsistent(2);
    }

    [Fact]
    public async Task A_drifted_probe_gets_a_new_zero_capture()
    {
        (await Run("probe-drift", Low)).Expect(0);

        Assert.Equal(2, _place.Ask<long>("select count(*) from captures where operating_point = 'zero'"));
    }

    [Theory]
    [InlineData("long-pulse", Low, Low, "two-pulses", "a pulse longer than set")]
    [InlineData("high-off-level", Low, Low, "gate-levels", "off at -2.9")]
    [InlineData("high-off-level@fire:1", Low, "proving-before", "gate-levels", "off at -2.9")]
    [InlineData("inductor-far-off", Low, "proving-before", "bus-agrees", "another inductor")]
    // Its flux at 20 A is still linear.
    [InlineData("saturating-inductor", High, High, "ramp-straightness", "the inductor saturates")]
    public async Task A_bench_that_is_not_what_it_was_set_to_is_stopped(
        string fault, string point, string at, string criterion, string reason)
    {
        (await Run(fault, point)).Expect(4);

        Assert.Contains($"{at} {criterion} stop", Findings());
        Assert.StartsWith("stopped", Outcome(), StringComparison.Ordinal);
        AssertReason(criterion);
        AssertReason(reason);
        Assert.Contains(reason, Trips(), StringComparison.Ordinal);
        AssertDownAndConsistent(1);
    }

    [Fact]
    public async Task A_place_held_off_that_turns_on_is_the_device_s_fault_found_before_high_voltage()
    {
        (await Run("gate-lifts", Low)).Expect(1);

        Assert.Equal(["proving-before high-side-off stop"], Findings());
        Assert.Equal("rejected 0 0", Outcome());
        AssertReason("the switch held off turns on");
        Assert.Equal("", Trips());
        AssertDownAndConsistent(1);
    }

    [Fact]
    public async Task A_noisy_probe_leaves_the_device_unmeasured_and_the_log_says_what_rejected_it()
    {
        Finished run = (await Run("noisy-probe", Low)).Expect(3);

        Assert.Contains($"{Low} noise-below retry", Findings());
        Assert.Equal("not-measured 8 0", Outcome());
        Assert.Contains("noise-below rejected 8 of 8 captures", run.Output, StringComparison.Ordinal);
        Assert.Equal(
            "warning",
            _place.Ask<string>("select severity from events where kind = 'criterion-counted' and message like "
                + "'noise-below rejected%'"));
        Assert.Equal("", Trips());
        AssertDownAndConsistent(2);
    }

    [Theory]
    // One capture is valid before the level sags; a device is not brought to high voltage on a bench that does so.
    [InlineData("weak-gate-driver", "stopped 8 1", 2, "half gate-levels retry", "proving-after gate-levels retry")]
    [InlineData("weak-gate-driver@fire:1", "stopped 0 0", 1, "proving-before gate-levels retry")]
    public async Task A_gate_driver_that_stays_weak_ends_the_session_as_an_unfit_bench(
        string fault, string outcome, int timesDown, params string[] findings)
    {
        (await Run(fault, Low)).Expect(5);

        Assert.Equal(findings, Findings());
        Assert.Equal(outcome, Outcome());
        AssertReason("3 trains and none that could be judged");
        AssertDownAndConsistent(timesDown);
    }

    [Fact]
    public async Task A_probe_whose_factor_changed_on_the_scope_fires_no_train_more()
    {
        (await Run("probe-factor-changes@fire:2", Low)).Expect(4);

        // The scope is asked before each train: the second one at the point was not fired.
        Assert.Equal(1, _place.Ask<long>($"select count(*) from captures where operating_point = '{Low}'"));
        Assert.StartsWith("stopped", Outcome(), StringComparison.Ordinal);
        AssertReason("the attenuation of id_low (input 3) is 10 where 1 was set");
        Assert.Contains("attenuation", Trips(), StringComparison.Ordinal);
        AssertDownAndConsistent(1);
    }

    [Theory]
    [InlineData("device-dies", "rejected 2 2", "did not survive its measurement")]
    [InlineData("device-dies@fire:2", "rejected 1 1", "the bus is at")]
    public async Task A_device_that_dies_is_rejected_and_the_bank_that_emptied_at_once_is_not_believed_empty(
        string fault, string outcome, string reason)
    {
        // The supply is set to 400 V and cannot charge the bus: what stops above 60 V trips.
        Finished run = (await Run(fault, Low)).Expect(4);

        Assert.DoesNotContain("guardian proved", run.Error, StringComparison.Ordinal);
        Assert.Equal(outcome, Outcome());
        AssertReason(reason);
        AssertReason("a position is shorted");
        AssertReason("the bus was not proved down");
        Assert.Contains("a position is shorted", Trips(), StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>(
            "select count(*) from events "
                + "where kind = 'bus-down' and at > (select min(at) from events where kind = 'trip')"));
        Assert.Empty(EvidenceAudit.Verify(_place.Evidence, cancel: TestContext.Current.CancellationToken).Problems);
    }

    [Fact]
    public async Task An_inductor_15_percent_off_is_corrected_in_two_steps()
    {
        (await Inductance("104.35 uH")).Expect(0);

        Assert.Equal([$"{Low} current-within retry"], Findings());
        Assert.Equal("accepted 4 2", Outcome());
        // 15 % is more than one capture may correct, and less than two may.
        Assert.Equal(
            "first pulse from 5.236 us to 5.76 us,first pulse from 5.76 us to 6.054 us",
            _place.Ask<string>("select group_concat(substr(message, instr(message, 'first pulse'))) from (select "
                + "json_extract(findings, '$[0].message') message from captures where not valid order by capture)"));
        AssertDownAndConsistent(2);
    }

    [Fact]
    public async Task An_inductor_30_percent_off_is_found_by_the_proving_train()
    {
        (await Inductance("92.3 uH")).Expect(4);

        Assert.Equal(["proving-before bus-agrees stop"], Findings());
        Assert.Equal("stopped 0 0", Outcome());
        AssertReason("another inductor");
        AssertDownAndConsistent(1);
    }

    /// <summary>The load that is fitted has 120 uH; the file states another.</summary>
    private async Task<Finished> Inductance(string stated)
    {
        string bench = _place.FakeBenchFile("{ seed: 1, pace: 5 }");
        string text = await File.ReadAllTextAsync(bench);
        Assert.Contains("inductance: 120 uH", text, StringComparison.Ordinal);
        await File.WriteAllTextAsync(
            bench, text.Replace("inductance: 120 uH", $"inductance: {stated}", StringComparison.Ordinal));
        return await _place.Run("run", _place.OnePoint(Low), "--device", "W1200-0001", "--bench", bench);
    }

    private Task<Finished> Run(string fault, string point) => _place.Run(
        "run", _place.OnePoint(point), "--device", "W1200-0001",
        "--bench", _place.FakeBenchFile($"{{ seed: 1, pace: 5, faults: ['{fault}'] }}"));

    /// <summary>Operating point, criterion and class of each kind of finding.</summary>
    private string[] Findings() =>
    [
        .. _place.Rows(
            "select distinct operating_point || ' ' || json_extract(finding.value, '$.criterion') || ' ' "
                + "|| json_extract(finding.value, '$.class') from captures, json_each(captures.findings) finding "
                + "order by 1").Select(row => (string)row[0]),
    ];

    private string Outcome() => _place.Ask<string>(
        "select outcome || ' ' || captures_taken || ' ' || captures_valid from device_outcomes");

    private string Trips() =>
        _place.Ask<string>("select coalesce(group_concat(message), '') from events where kind = 'trip'");

    private void AssertReason(string part) => Assert.Contains(
        part, _place.Ask<string>("select reason from device_outcomes"), StringComparison.Ordinal);

    private void AssertDownAndConsistent(long timesDown)
    {
        Assert.Equal(timesDown, _place.Ask<long>("select count(*) from events where kind = 'bus-down'"));
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where kind = 'bus-not-proved-down'"));
        Assert.Empty(EvidenceAudit.Verify(_place.Evidence).Problems);
    }
}
