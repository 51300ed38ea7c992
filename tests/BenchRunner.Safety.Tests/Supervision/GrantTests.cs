using BenchRunner.Instruments.Permits;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Tests.Benches;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Safety.Tests.Supervision;

/// <summary>When leave to energise is given, how long it lives, when it is refused.</summary>
public sealed class GrantTests
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task A_grant_above_the_envelope_is_refused_and_no_trip()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);

        var high = await Assert.ThrowsAsync<SafetyException>(() => supervisor.Grant(LiveBench.UpTo(901), Cancel));
        var wide = await Assert.ThrowsAsync<SafetyException>(
            () => supervisor.Grant(LiveBench.UpTo(600, 21e-6), Cancel));

        Assert.Contains("901 V", high.Message, StringComparison.Ordinal);
        Assert.Contains("ends at 900 V", high.Message, StringComparison.Ordinal);
        Assert.Contains("21 us", wide.Message, StringComparison.Ordinal);
        Assert.Null(supervisor.Trip);
    }

    [Fact]
    public async Task A_grant_at_the_envelope_is_live_and_the_next_one_ends_it()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);

        Permit first = await supervisor.Grant(LiveBench.UpTo(900, 20e-6), Cancel);
        Assert.Null(first.WhyNot);
        Permit second = await supervisor.Grant(LiveBench.UpTo(300), Cancel);

        Assert.Equal("another permit was granted", first.WhyNot);
        Assert.Null(second.WhyNot);
    }

    [Fact]
    public async Task No_permit_is_granted_while_the_enclosure_is_open()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor(new FakeTimeProvider());
        await supervisor.Start(Cancel);
        bench.Do("open");
        await Eventually.True(async () => !(await bench.Roles.Interlock.Read(Cancel)).LoopClosed, "an open loop");

        var refused = await Assert.ThrowsAsync<SafetyException>(() => supervisor.Grant(LiveBench.UpTo(300), Cancel));

        Assert.Contains("loop is open", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task An_open_enclosure_on_an_idle_bench_is_no_trip()
    {
        await using LiveBench bench = await LiveBench.Start();
        bench.Do("open");
        await Eventually.True(async () => !(await bench.Roles.Interlock.Read(Cancel)).LoopClosed, "an open loop");
        SafetySupervisor supervisor = bench.Supervisor();

        await supervisor.Start(Cancel);

        Assert.Null(supervisor.Trip);
    }

    [Fact]
    public async Task Only_complete_polls_keep_a_permit_alive()
    {
        // The watch and the permit go by the test's clock, the instruments by their own.
        await using LiveBench bench = await LiveBench.Start();
        var time = new FakeTimeProvider();
        SafetySupervisor supervisor = bench.Supervisor(time);
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(100), Cancel);

        // A poll that has seen a new voltage is known to have renewed the permit once the poll after it is under way.
        foreach (double volts in (double[])[30, 50])
        {
            await bench.StrangerCharges(volts);
            await Eventually.True(
                () =>
                {
                    time.Advance(SafetyLimits.PollEvery);
                    return supervisor.LastVoltage > 0.97 * volts;
                },
                $"a poll that sees {volts} V");
        }

        time.Advance(SafetyLimits.PermitLife - SafetyLimits.PollEvery);
        Assert.Null(permit.WhyNot);
    }

    [Fact]
    public async Task A_permit_that_was_not_renewed_in_time_is_dead_though_the_watch_comes_back()
    {
        await using LiveBench bench = await LiveBench.Start();
        var time = new FakeTimeProvider();
        SafetySupervisor supervisor = bench.Supervisor(time);
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(100), Cancel);

        time.Advance(SafetyLimits.PermitLife + TimeSpan.FromMilliseconds(1));
        await Assert.ThrowsAsync<PermitException>(() => bench.Roles.Interlock.ReleaseBleeder(permit, Cancel));
        await bench.StrangerCharges(30);
        await Eventually.True(
            () =>
            {
                time.Advance(SafetyLimits.PollEvery);
                return supervisor.LastVoltage > 29;
            },
            "a poll");

        Assert.Equal("not renewed within 10 s", permit.WhyNot);
    }
}
