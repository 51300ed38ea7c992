using BenchRunner.Instruments.Permits;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Tests.Benches;

namespace BenchRunner.Safety.Tests.Supervision;

/// <summary>What the watch notices beside interlock and voltage: its guardian, its own gaps, a run that stands still, and a
/// bus that rises once more.</summary>
public sealed class WatchTests
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task A_guardian_that_is_lost_with_the_bus_up_is_a_trip()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = await Charged(bench);

        bench.Guardian.Lose("the guardian has ended");
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        Assert.Contains("the guardian has ended", supervisor.Trip!.Reason, StringComparison.Ordinal);
        Assert.True((await supervisor.MakeSafe()).Proved);
    }

    [Fact]
    public async Task Without_a_living_guardian_no_permit_is_granted()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = bench.Supervisor();
        await supervisor.Start(Cancel);

        bench.Guardian.Die();
        var refused = await Assert.ThrowsAsync<SafetyException>(() => supervisor.Grant(LiveBench.UpTo(100), Cancel));

        Assert.Contains("guardian", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_run_that_does_not_get_on_is_a_trip_that_names_what_it_was_at()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = await Charged(bench);

        supervisor.Progress("firing and reading a train", TimeSpan.FromMilliseconds(50));
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        Assert.Contains(
            "makes no progress: firing and reading a train", supervisor.Trip!.Reason, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData(true)]
    [InlineData(false)]
    public async Task A_computer_that_slept_with_the_bus_up_is_a_trip(bool itsMonotonicClockWentOn)
    {
        var clock = new SleepingClock();
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = await Charged(bench, clock);

        clock.Sleep(TimeSpan.FromMinutes(1), itsMonotonicClockWentOn);
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        Assert.Contains("nothing was watched for 60.", supervisor.Trip!.Reason, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_bus_that_rises_after_its_proof_trips()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = await Charged(bench);
        Assert.True((await supervisor.MakeSafe()).Proved);

        await bench.StrangerSets(100);
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        Assert.Contains("after it was proved down", supervisor.Trip!.Reason, StringComparison.Ordinal);
        Assert.True((await supervisor.MakeSafe()).Proved);
    }

    [Fact]
    public async Task A_bus_that_rises_after_a_trip_and_its_proof_alarms_and_is_brought_down_once_more()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = await Charged(bench);
        supervisor.TripNow("somebody asked for it");
        Assert.True((await supervisor.MakeSafe()).Proved);

        await bench.StrangerSets(100);
        await Eventually.True(() => bench.Said.Count("bus-risen") == 1, "an alarm");
        await Eventually.True(() => bench.Said.Count("bus-down") == 2, "a second proof");

        Assert.Equal("somebody asked for it", supervisor.Trip!.Reason);
    }

    [Theory]
    [InlineData("supply", "silent-supply@volts:150")]
    [InlineData("pulser", "pulser/half-open@volts:150")]
    public async Task A_supply_or_pulser_that_falls_silent_with_the_bus_up_is_a_trip_though_nobody_waits_for_it(
        string role, string fault)
    {
        await using LiveBench bench = await LiveBench.Start(fault);
        SafetySupervisor supervisor = await Charged(bench, upTo: 100);
        Assert.Null(supervisor.Trip);

        await bench.StrangerSets(200);
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        Assert.Contains($"the {role} gives no sign of life", supervisor.Trip!.Reason, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_pulser_that_somebody_switches_off_with_the_bus_up_is_a_trip()
    {
        await using LiveBench bench = await LiveBench.Start();
        SafetySupervisor supervisor = await Charged(bench);

        await bench.Stranger("pulser", "OUTP OFF");
        await Eventually.True(() => supervisor.Trip is not null, "a trip");

        Assert.Contains("nothing holds the gates off", supervisor.Trip!.Reason, StringComparison.Ordinal);
        Assert.True((await supervisor.MakeSafe()).Proved);
    }

    private static async Task<SafetySupervisor> Charged(
        LiveBench bench, TimeProvider? time = null, double upTo = 200)
    {
        SafetySupervisor supervisor = bench.Supervisor(time);
        await supervisor.Start(Cancel);
        Permit permit = await supervisor.Grant(LiveBench.UpTo(200), Cancel);
        await bench.Charge(permit, supervisor, upTo);
        await Eventually.True(() => supervisor.LastVoltage > 60, "a watch that sees the bus");
        return supervisor;
    }

    /// <summary>The system's clock, which leaps when told to; its timers do not.</summary>
    private sealed class SleepingClock : TimeProvider
    {
        private long _monotonic;
        private long _calendar;

        public void Sleep(TimeSpan span, bool monotonicToo)
        {
            Interlocked.Add(ref _monotonic, monotonicToo ? (long)(span.TotalSeconds * TimestampFrequency) : 0);
            Interlocked.Add(ref _calendar, span.Ticks);
        }

        public override long GetTimestamp() => System.GetTimestamp() + Interlocked.Read(ref _monotonic);

        public override DateTimeOffset GetUtcNow() =>
            System.GetUtcNow() + TimeSpan.FromTicks(Interlocked.Read(ref _calendar));
    }
}
