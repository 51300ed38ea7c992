using BenchRunner.Evidence.Audits;

namespace EndToEnd;

/// <summary>Rows of the fault table (tests/reference/scpi/faults.json, by their ids) that other tests do not hold, and
/// mishaps of a bench, each alone through a whole run: it ends as its row says, and the evidence is whole.</summary>
/// <remarks>docs/faults.md says which test holds which row: most go this road in simulated time
/// (tests/Soak.Tests).</remarks>
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
    [InlineData("F10", "supply/overload@volts:200", "with no number")]
    [InlineData("F27", "pulser/reboot", "pulser")]
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
