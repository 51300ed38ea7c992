using BenchRunner.Acceptance.Benches;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Tests.Benches;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.Tests.SafeStates;

/// <summary>The safe state, on instruments that do what they are told and on some that do not.</summary>
public sealed class SafeStateTests
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task A_charged_bus_is_discharged_and_proved_down()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(200), Cancel);
        await bench.Charge(permit, supervisor, 200);

        SafeStateReport report = await supervisor.MakeSafe();

        Assert.True(report.Proved);
        Assert.InRange(report.Voltage!.Value, 0, SafetySettings.UsualBusDown);
        Assert.Empty(report.Doubts);
        SupplyState supply = await bench.Supply.ReadState(Cancel);
        Assert.False(supply.OutputOn);
        Assert.Equal(0, supply.Set.Value);
        Assert.Equal("the bench is being made safe", permit.WhyNot);
        Assert.Null(supervisor.Trip);
        Assert.False(supervisor.Witness.MayBeEnergised);
    }

    [Fact]
    public async Task Who_asks_while_it_is_under_way_gets_the_same_report()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(200), Cancel);
        await bench.Charge(permit, supervisor, 200);

        Task<SafeStateReport> first = supervisor.MakeSafe();
        Task<SafeStateReport> second = supervisor.MakeSafe();

        Assert.Same(await first, await second);
        Assert.Equal(1, bench.Said.Count("bus-down"));
    }

    [Fact]
    public async Task A_bus_that_stays_up_is_not_proved_down()
    {
        await using LiveBench bench = await LiveBench.Start("bus-stays-up");
        BusWitness witness = LiveBench.Witness();
        await bench.StrangerCharges(100);

        SafeStateReport report = await bench.SafeState(witness).Reach();

        Assert.False(report.Proved);
        Assert.InRange(report.Voltage!.Value, SafetySettings.UsualBusDown, 101);
        Assert.Contains(report.Doubts, doubt => doubt.Contains("expected below 60 V", StringComparison.Ordinal));
        Assert.Equal(1, bench.Said.Count("bus-not-proved-down"));
        Assert.Equal(0, bench.Said.Count("bus-down"));
        Assert.True(witness.MayBeEnergised);
    }

    [Fact]
    public async Task A_bus_that_is_not_proved_down_is_a_trip()
    {
        await using LiveBench bench = await LiveBench.Start("bus-stays-up");
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(100), Cancel);
        await bench.Charge(permit, supervisor, 100);

        Assert.False((await supervisor.MakeSafe()).Proved);

        Assert.True(supervisor.Tripped.IsCancellationRequested);
        Assert.Equal("the bus was not proved down", supervisor.Trip!.Reason);
        Assert.True(supervisor.Trip.Energised);
    }

    [Fact]
    public async Task A_voltmeter_that_never_followed_the_bus_up_is_not_believed()
    {
        await using LiveBench bench = await LiveBench.Start("voltmeter-open");
        BusWitness witness = LiveBench.Witness();
        witness.Commanded(200);
        await bench.StrangerSets(200);
        await bench.SupplyShows(200);

        SafeStateReport report = await bench.SafeState(witness).Reach();

        Assert.False(report.Proved);
        Assert.Contains(report.Doubts, doubt => doubt.Contains("never followed the bus up", StringComparison.Ordinal));
        Assert.Equal(0, bench.Said.Count("bus-down"));
    }

    [Fact]
    public async Task A_fall_faster_than_the_stated_bleeder_allows_is_not_believed()
    {
        await using LiveBench bench = await LiveBench.Start();
        BusWitness witness = LiveBench.Witness(new Discharge(250e3, 50e-6));
        await bench.StrangerCharges(400);

        // The bench file states 250 kOhm where 5 kOhm are fitted: the bus falls in a fiftieth of the planned time.
        SafeStateReport report = await bench.SafeState(witness).Reach();

        Assert.False(report.Proved);
        Assert.InRange(report.Voltage!.Value, 0, SafetySettings.UsualBusDown);
        Assert.Contains(
            report.Doubts, doubt => doubt.Contains("faster than the bleeder can", StringComparison.Ordinal));
        Assert.True(witness.MayBeEnergised);
    }

    [Fact]
    public async Task An_instrument_that_does_not_answer_holds_up_no_other_and_is_named()
    {
        await using LiveBench bench = await LiveBench.Start("silent-supply@volts:100");
        BusWitness witness = LiveBench.Witness();
        await bench.StrangerCharges(200);

        SafeStateReport report = await bench.SafeState(witness).Reach();

        // The supply obeys without answering, so the bus does come down, and the voltmeter proves it.
        Assert.True(report.Proved);
        Assert.Contains(report.Doubts, doubt => doubt.StartsWith("supply did not confirm", StringComparison.Ordinal));
    }
}
