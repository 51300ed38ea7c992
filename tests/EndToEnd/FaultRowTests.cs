using BenchRunner.Evidence.Audits;

namespace EndToEnd;

/// <summary>Rows of the fault table (tests/reference/scpi/faults.json, by their ids) that other tests do not hold, and
/// mishaps of a bench, each alone through a whole run: it ends as its row says, and the evidence is whole.</summary>
/// <remarks>docs/faults.md says which test holds which row.</remarks>
[Trait("kind", "slow")]
public sealed class FaultRowTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Theory]
    [InlineData("F01", "scope/refused", "cannot connect")]
    [InlineData("F14", "interlock/echo", "switch the instrument's echo off")]
    public async Task A_link_that_is_none_is_refused_before_anything_is_energised(string row, string fault, string why)
    {
        Finished run = (await Run(fault)).Expect(5);

        Assert.Contains(why, run.All, StringComparison.Ordinal);
        Assert.True(_place.Ask<long>("select count(*) from device_outcomes") == 0, row);
    }

    [Theory]
    [InlineData("F06", "scope/reply-twice")]
    [InlineData("F11", "scope/garbage")]
    public async Task A_spoilt_reply_is_dropped_and_the_link_resynchronised(string row, string fault)
    {
        (await Run(fault)).Expect(0);

        Assert.True(Events("link-resynchronised") > 0, row);
        AssertConsistent();
    }

    [Theory]
    [InlineData("F07", "scope/block-cut")]
    [InlineData("F08", "scope/block-digits")]
    [InlineData("F09", "scope/block-long")]
    public async Task A_spoilt_block_costs_its_capture_and_is_never_patched(string row, string fault)
    {
        (await Run(fault)).Expect(0);

        Assert.True(Events("discarded") > 0, row);
        Assert.Equal(1, _place.Ask<long>(
            "select count(*) from captures where not valid and findings like '%\"complete\"%'"));
        AssertConsistent();
    }

    [Fact]
    public async Task F13_replies_in_steps_cost_time_and_nothing_else()
    {
        (await Run("supply/halves")).Expect(0);

        Assert.Equal(0, Events("link-doubt"));
        AssertConsistent();
    }

    [Theory]
    [InlineData("F03", "supply/half-open@volts:200", "the supply's word is in doubt")]
    [InlineData("F04", "supply/drip@volts:200", "the supply's word is in doubt")]
    [InlineData("F10", "supply/overload@volts:200", "with no number")]
    [InlineData("F11", "interlock/garbage@volts:200", "the watch lost sight of the bench")]
    [InlineData("F12", "interlock/wrong-end@volts:200", "the watch lost sight of the bench")]
    [InlineData("F27", "supply/reboot", "the supply's word is in doubt")]
    [InlineData("F27", "pulser/reboot", "was taken as")]
    [InlineData("F31", "bleeder-weak", "the bus was not proved down")]
    [InlineData("F36", "probe-off", "bus-agrees")]
    [InlineData("F37", "supply-overshoots", "above the 420.0 V that the permit allows")]
    [InlineData("gate stuck on", "gate-stuck-on", "vgs_low is still on at the end of the record")]
    [InlineData("pulser fires on arm", "fires-on-arm", "pulser")]
    [InlineData("pulser fires twice", "fires-twice", "counts 2 trains where one was fired")]
    public async Task A_bench_that_cannot_be_trusted_above_60_V_trips(string row, string fault, string why)
    {
        (await Run(fault)).Expect(4);

        Assert.Contains(why, _place.Ask<string>("select reason from device_outcomes"), StringComparison.Ordinal);
        Assert.True(Events("trip") == 1, row);
        Assert.NotEqual("accepted", _place.Ask<string>("select outcome from device_outcomes"));
        AssertConsistent();
    }

    [Fact]
    public async Task A_bus_that_rises_after_its_proof_is_said_and_trips()
    {
        (await Run("bus-rises")).Expect(4);

        // Before the proving train's permit is granted, or under it: the bank does not wait for either.
        Assert.Matches(
            "the bus (rose to .* after it was proved down|is at .* above the .* that the permit allows)",
            _place.Ask<string>("select message from events where kind = 'trip'"));

        // It was brought down and proved once more.
        Assert.Equal(1, _place.Ask<long>(
            "select count(*) from events "
                + "where kind = 'bus-down' and at > (select at from events where kind = 'trip')"));
        AssertConsistent();
    }

    [Fact]
    public async Task F12_a_scope_whose_replies_do_not_end_is_lost_and_the_bench_made_safe()
    {
        (await Run("scope/wrong-end")).Expect(5);

        Assert.True(Events("bus-down") > 0);
        Assert.Equal(0, Events("bus-not-proved-down"));
        AssertConsistent();
    }

    private Task<Finished> Run(string fault) => _place.Run(
        "run", Workplace.Sequence, "--device", "W1200-0001",
        "--bench", _place.FakeBenchFile($"{{ seed: 1, pace: 5, faults: ['{fault}'] }}"));

    private long Events(string kind) => _place.Ask<long>($"select count(*) from events where kind = '{kind}'");

    private void AssertConsistent()
    {
        Assert.Empty(EvidenceAudit.Verify(_place.Evidence).Problems);
        Assert.Equal(0, _place.Ask<long>("select count(*) from device_outcomes where finished_at is null"));
        Assert.Equal(0, _place.Ask<long>(
            "select count(*) from captures where valid is null and operating_point <> 'zero'"));
    }
}
