using BenchRunner.Evidence.Audits;

namespace EndToEnd;

/// <summary>Each fault of the fake bench to its documented exit code, the bus down at the end, the evidence
/// consistent.</summary>
public sealed class FaultTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Theory]
    [InlineData("interlock-opens", 4, "stopped", "interlock loop is open")]
    [InlineData("interlock-opens@fire:3", 4, "stopped", "interlock loop is open")]
    [InlineData("emergency-stop", 4, "stopped", "emergency stop")]
    // Its output is on from the proving train: the bus is on its way up when the read-back shows it.
    [InlineData("supply-clips", 4, "stopped", "taken as 350")]
    [InlineData("over-voltage-trips", 4, "stopped", "over-voltage protection")]
    public Task A_fault_that_ends_the_run_leaves_the_bus_down(
        string fault, int exitCode, string outcome, string reason) => EndsTheRun(fault, exitCode, outcome, reason);

    [Theory]
    [Trait("kind", "slow")]
    [InlineData("silent-supply", 4, "stopped", "the supply gives no sign of life")]
    [InlineData("second-controller@fire:3", 4, "stopped", "above the 420.0 V that the permit allows")]
    [InlineData("fire-unanswered", 4, "stopped", "the pulser gives no sign of life")]
    [InlineData("probe-factor-changes", 4, "stopped", "the attenuation of id_low (input 3) is 10 where 1 was set")]
    public Task A_fault_that_takes_long_to_end_the_run_leaves_the_bus_down(
        string fault, int exitCode, string outcome, string reason) => EndsTheRun(fault, exitCode, outcome, reason);

    [Theory]
    [Trait("kind", "slow")]
    [InlineData("stale-record", "fresh", 11)]
    // The wider range that follows is too wide once the fault has passed: one capture more.
    [InlineData("clipped-range", "not-clipped", 12)]
    [InlineData("link-drops@block:21", "complete", 11)]
    public async Task A_bad_capture_is_rejected_with_its_criterion_and_taken_again(
        string fault, string criterion, long taken)
    {
        (await Run(fault)).Expect(0);

        Assert.Equal(1, _place.Ask<long>($"select count(*) from captures where not valid and findings like "
            + $"'%\"{criterion}\"%'"));
        Assert.Equal(taken, _place.Ask<long>("select captures_taken from device_outcomes"));
        Assert.Equal(10, _place.Ask<long>("select captures_valid from device_outcomes"));
        AssertBusDown();
        AssertConsistent();
    }

    [Fact]
    public async Task A_train_without_a_record_costs_one_capture()
    {
        (await Run("trigger-missed")).Expect(0);

        Assert.Equal(1, _place.Ask<long>("select count(*) from events where kind = 'trigger-missed'"));
        Assert.Equal(10, _place.Ask<long>("select captures_valid from device_outcomes"));
        AssertBusDown();
        AssertConsistent();
    }

    [Theory]
    [InlineData("late-reply")]
    [InlineData("error-queue-full")]
    [Trait("kind", "slow")]
    public async Task A_fault_that_can_be_mended_changes_no_value(string fault)
    {
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001", "--evidence", "sound.db")).Expect(0);
        (await Run(fault)).Expect(0);

        const string values =
            "select operating_point, quantity, definition, value, conformity from measurements order by 1, 2, 3";
        Assert.Equal(_place.Rows(values, _place.Path("sound.db")), _place.Rows(values));
        AssertBusDown();
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_fuse_that_opens_with_the_bus_up_is_no_proof()
    {
        Finished run = (await Run("fuse-opens")).Expect(4);

        Assert.Contains("THE BUS IS NOT PROVED DOWN", run.Output, StringComparison.Ordinal);
        Assert.Equal("stopped", _place.Ask<string>("select outcome from device_outcomes"));
        Assert.Equal(0, _place.Ask<long>(
            "select count(*) from events where kind = 'bus-down' and at > (select min(at) from events where kind = 'trip')"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_voltmeter_whose_lead_is_off_lets_nothing_above_the_proving_train_s_voltage()
    {
        Finished run = (await Run("voltmeter-open")).Expect(4);

        Assert.Contains("look at supply, leads and voltmeter", run.Output, StringComparison.Ordinal);
        Assert.Equal("stopped", _place.Ask<string>("select outcome from device_outcomes"));
        Assert.Equal("zero", _place.Ask<string>("select group_concat(distinct operating_point) from captures"));
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where kind = 'point-started'"));
        AssertConsistent();
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_trace_that_is_lost_on_its_way_costs_a_proving_train_and_no_capture()
    {
        (await Run("link-drops")).Expect(0);

        Assert.Equal(
            "1 0,2 1", _place.Ask<string>(
                "select group_concat(capture || ' ' || valid) from captures where operating_point = 'proving-before'"));
        Assert.Equal(10, _place.Ask<long>("select captures_taken from device_outcomes"));
        AssertBusDown();
    }

    [Theory]
    [InlineData("wrong-identity")]
    [InlineData("single-client")]
    public async Task A_bench_that_is_not_what_its_file_says_is_refused_before_anything_is_energised(string fault)
    {
        (await Run(fault)).Expect(5);

        Assert.Equal(0, _place.Ask<long>("select count(*) from device_outcomes"));
    }

    private async Task EndsTheRun(string fault, int exitCode, string outcome, string reason)
    {
        (await Run(fault)).Expect(exitCode);

        Assert.Equal(outcome, _place.Ask<string>("select outcome from device_outcomes"));
        Assert.Contains(reason, _place.Ask<string>("select reason from device_outcomes"), StringComparison.Ordinal);
        AssertBusDown();
        AssertConsistent();
    }

    private Task<Finished> Run(string fault) => _place.Run(
        "run", Workplace.Sequence, "--device", "W1200-0001",
        "--bench", _place.FakeBenchFile($"{{ seed: 1, pace: 5, faults: ['{fault}'] }}"));

    private void AssertBusDown()
    {
        Assert.InRange(_place.Ask<long>("select count(*) from events where kind = 'bus-down'"), 1, 2);
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where kind = 'bus-not-proved-down'"));
    }

    /// <summary>SQLite finds the file whole, every run has its end and its seal, and every capture its
    /// payload.</summary>
    private void AssertConsistent()
    {
        Assert.Empty(EvidenceAudit.Verify(_place.Evidence).Problems);
        Assert.Equal("ok", _place.Ask<string>("pragma integrity_check"));
        Assert.Equal(0, _place.Ask<long>("select count(*) from device_outcomes where finished_at is null"));
        Assert.Equal(0, _place.Ask<long>("select count(*) from capture where id not in (select capture from payload)"));
    }
}
