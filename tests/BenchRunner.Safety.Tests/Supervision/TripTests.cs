using BenchRunner.Instruments.Permits;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Tests.Benches;

namespace BenchRunner.Safety.Tests.Supervision;

/// <summary>What trips, and what a trip does by itself.</summary>
public sealed class TripTests
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Theory]
    [InlineData("open", "the interlock loop is open")]
    [InlineData("stop", "the emergency stop is pressed")]
    public async Task A_doubt_while_a_permit_lives_ends_it_and_the_bench_is_made_safe_unasked(
        string hand, string reason)
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(200), Cancel);
        await bench.Charge(permit, supervisor, 200);
        await Eventually.True(() => supervisor.LastVoltage > 60, "a watch that sees the bus");

        bench.Do(hand);
        await Eventually.True(() => supervisor.Tripped.IsCancellationRequested, "a trip");

        Assert.Equal(reason, permit.WhyNot);
        Assert.Equal(reason, supervisor.Trip!.Reason);
        Assert.True(supervisor.Trip.Energised);
        await Assert.ThrowsAsync<PermitException>(() => bench.Supply.OutputOn(permit, Cancel));
        await Eventually.True(() => bench.Said.Count("bus-down") == 1, "a proof that nobody asked for");
    }

    [Fact]
    public async Task After_a_trip_there_is_no_permit_and_the_first_reason_stands()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);

        supervisor.TripNow("the first");
        supervisor.TripNow("the second");

        Assert.Equal("the first", supervisor.Trip!.Reason);
        Assert.False(supervisor.Trip.Energised);
        Assert.Equal(1, bench.Said.Count("trip"));
        var refused = await Assert.ThrowsAsync<SafetyException>(() => supervisor.Grant(LiveBench.UpTo(100), Cancel));
        Assert.Contains("the first", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_bus_above_what_the_permit_allows_trips()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(100), Cancel);
        await bench.Charge(permit, supervisor, 100);

        await bench.StrangerCharges(150);
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        // 5 % above the 100 V of the permit.
        Assert.Contains("above the 105.0 V that the permit allows", supervisor.Trip!.Reason, StringComparison.Ordinal);
        Assert.NotNull(permit.WhyNot);
        Assert.True((await supervisor.MakeSafe()).Proved);
    }

    [Fact]
    public async Task A_bus_found_charged_stops_the_watch_from_starting()
    {
        await using LiveBench bench = await LiveBench.Start();
        await bench.StrangerCharges(100);
        SafetySupervisor supervisor = bench.Supervisor();

        var found = await Assert.ThrowsAsync<SafetyException>(() => supervisor.Start(Cancel));

        Assert.Contains("nothing was allowed to charge it", found.Message, StringComparison.Ordinal);
        Assert.True(supervisor.Trip!.Energised);
        Assert.True((await supervisor.MakeSafe()).Proved);
    }

    [Fact]
    public async Task A_bus_charged_without_a_permit_trips()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);

        await bench.StrangerCharges(100);

        await Eventually.True(() => supervisor.Trip is not null, "a trip");
        Assert.Contains("nothing was allowed to charge it", supervisor.Trip!.Reason, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_lost_link_trips_and_the_bus_is_not_called_down()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(100), Cancel);
        await bench.Charge(permit, supervisor, 100);

        bench.CutPower();
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        Assert.Contains("lost sight of the bench", supervisor.Trip!.Reason, StringComparison.Ordinal);
        Assert.NotNull(permit.WhyNot);
        SafeStateReport report = await supervisor.MakeSafe();
        Assert.False(report.Proved);
        Assert.Equal(1, bench.Said.Count("bus-not-proved-down"));
    }

    [Fact]
    public async Task The_controllers_own_watchdog_having_acted_is_a_doubt()
    {
        await using LiveBench bench = await LiveBench.Start();
        await bench.Roles.Interlock.SetWatchdog(TimeSpan.FromMilliseconds(10), Cancel);
        await Eventually.True(
            async () =>
            {
                // Reading the state feeds the watchdog, so it is left alone for longer than its time.
                await Task.Delay(TimeSpan.FromMilliseconds(30), TimeProvider.System, Cancel);
                return (await bench.Roles.Interlock.Read(Cancel)).WatchdogTripped;
            },
            "a watchdog that has acted");

        var found = await Assert.ThrowsAsync<SafetyException>(() => bench.Supervisor().Start(Cancel));

        Assert.Contains("watchdog", found.Message, StringComparison.Ordinal);
    }
}
