using BenchRunner.Acceptance.Events;
using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Tests.Benches;
using BenchRunner.Safety.Watches;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Safety.Tests.Guardians;

/// <summary>The guardian's logic by the test's clock: whom it ends, in which order it acts, what it says.</summary>
public sealed class GuardianCoreTests
{
    private static readonly TimeSpan _step = TimeSpan.FromMilliseconds(20);
    private readonly FakeTimeProvider _time = new();
    private readonly Recorder _said = new();
    private readonly GuardedDouble _guarded = new();

    [Fact]
    public async Task A_run_that_is_done_lets_it_leave_without_a_deed()
    {
        _guarded.Beat(HeardKind.Polled);
        _guarded.Beat(HeardKind.Done, 0);

        Assert.Equal(GuardianEnding.NotNeeded, await Run());
        Assert.Empty(_guarded.Did);
    }

    [Fact]
    public async Task Silence_ends_the_runner_before_anything_is_touched()
    {
        _guarded.Beat(HeardKind.Polled, 0);

        Assert.Equal(GuardianEnding.ProvedDown, await Run());

        Assert.Equal("runner ended", _guarded.Did[0]);
        Assert.Equal(["supply", "pulser", "bleeder"], _guarded.Did.Skip(1));
        Assert.Equal(1, _said.Count("guardian-acts"));
        Assert.Equal(1, _said.Count("guardian-proved"));
    }

    [Fact]
    public async Task A_runner_that_leaves_is_not_ended_and_the_bus_is_brought_down()
    {
        _guarded.Beat(HeardKind.Left, 0);

        Assert.Equal(GuardianEnding.ProvedDown, await Run());

        Assert.DoesNotContain("runner ended", _guarded.Did);
        Assert.Equal("supply", _guarded.Did[0]);
    }

    [Fact]
    public async Task It_switches_off_beside_a_runner_that_makes_safe()
    {
        _guarded.Beat(HeardKind.MakingSafe);
        _guarded.Beat(HeardKind.Done, 0);

        Assert.Equal(GuardianEnding.NotNeeded, await Run());
        Assert.Equal(["own"], _guarded.Did);
    }

    [Theory]
    [InlineData(600)]
    [InlineData(double.NaN)]
    public async Task A_bus_that_stays_up_is_said_at_once_and_each_10_s_and_no_oftener(double volts)
    {
        _guarded.Volts = volts;
        _guarded.Beat(HeardKind.Ended);

        Assert.Equal(GuardianEnding.NotProved, await Run());

        // 30 s of trying.
        Assert.InRange(_said.Count("bus-not-proved-down"), 2, 4);
        Assert.Equal(1, _said.Count("guardian-not-proved"));
        Assert.Equal(1, _said.Count("safe-state"));
        Assert.True(_guarded.Did.Count(what => what == "supply") > 4, "it tries on, whatever it says");
    }

    [Fact]
    public async Task A_bus_that_rises_after_proof_alarms_and_is_brought_down_again()
    {
        _guarded.Beat(HeardKind.Ended);
        Task<GuardianEnding> run = Core().Run();
        await Until(() => _said.Count("guardian-proved") == 1);

        _guarded.Volts = 120;
        await Until(() => _said.Count("bus-risen") == 1);
        Assert.False(run.IsCompleted);
        await Until(() => _guarded.Did.Count(what => what == "supply") == 2);
        _guarded.Volts = 119;
        await Until(() => _said.Count("bus-not-proved-down") + _said.Count("bus-slow") > 0);
        Assert.False(run.IsCompleted);
    }

    private GuardianCore Core()
    {
        var events = new EventSource("guardian", _said, _time);
        BusWitness witness = LiveBench.Witness(time: _time);
        return new GuardianCore(
            [_guarded.Part("own")], new SafeState(_guarded.Roles, witness, events, _time), witness, _guarded, _guarded,
            new GuardianOptions(TimeSpan.FromSeconds(0.5), TimeSpan.FromSeconds(10), TimeSpan.FromSeconds(30))
            {
                DownBelow = 60,
                WatchAfterProof = TimeSpan.FromSeconds(2),
            },
            events, _time);
    }

    private async Task<GuardianEnding> Run()
    {
        Task<GuardianEnding> run = Core().Run();
        await Until(() => run.IsCompleted);
        return await run;
    }

    /// <summary>Time passes only as far as the guardian has come: what a step woke is let run first.</summary>
    private async Task Until(Func<bool> isSo) => await Eventually.True(
        () =>
        {
            _time.Advance(_step);
            return isSo();
        },
        "the guardian");
}
