using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;
using BenchRunner.Runner.Tests.Workplaces;
using BenchRunner.Safety;
using BenchRunner.Safety.Latches;
using BenchRunner.Safety.Locks;

namespace BenchRunner.Runner.Tests.Sessions;

/// <summary>Sessions in this process, on a fake bench that runs and an evidence file that is written.</summary>
public sealed class RunSessionTests : IDisposable
{
    private const string Rest = """
        captures: { valid: 2, at-most: 4 }
        limits:
          - { quantity: eon, at: half, at-most: 1 mJ }
          - { quantity: vds_peak_off, at: half, at-most: 1 kV }
        """;

    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_sound_device_is_accepted_and_everything_is_in_the_evidence()
    {
        Sequence sequence = _place.Sequence(Rest);

        RunSummary summary = await _place.Run(sequence, _place.Bench(), _heard);

        DeviceReport report = Assert.Single(summary.Devices);
        Assert.True(summary.Simulated);
        Assert.Empty(summary.NotRun);
        Assert.Equal((Outcome.Accepted, BenchEnding.Proved), (report.Decision.Outcome, report.Ending));
        Assert.InRange(report.BusVoltage!.Value, 0, SafetySettings.UsualBusDown);
        Assert.Same(report, Assert.Single(_heard.Devices));

        // One result for each limit, in the order of the sequence.
        Assert.Equal(sequence.Limits, _heard.Cases.Select(one => one.Limit));
        Assert.All(_heard.Cases, one => Assert.Equal(CaseEnding.Conforms, one.Ending));

        Assert.Equal(report.Run, _place.Ask<string>("select run from device_outcomes where outcome = 'accepted'"));
        Assert.Equal(
            report.CapturesTaken, _place.Ask<int>("select count(*) from captures where operating_point = 'half'"));
        Assert.Equal(
            "zero,proving-before,half,proving-after",
            _place.Ask<string>("select group_concat(distinct operating_point) from captures"));
        Assert.Equal(5, _place.Ask<int>("select count(*) from instruments"));
        Assert.Equal(2, _place.Ask<int>("select count(*) from measurements where conformity = 'conforms'"));

        // Once before the second proving train, once at the end.
        Assert.Equal(2, _place.Ask<int>("select count(*) from events where kind = 'bus-down'"));
    }

    [Fact]
    public async Task What_is_not_confirmed_is_not_begun()
    {
        var person = new Person(null);
        var session =
            new RunSession(_place.Request(_place.Sequence(Rest), _place.Bench()), _heard, person, TimeProvider.System)
            {
                Guardian = LivingGuardian.Start,
            };

        var refused = await Assert.ThrowsAsync<RefusedException>(
            () => session.Run(new Serials(Workplace.Device), Cancel));

        Assert.Equal(RefusalKind.Input, refused.Kind);
        Assert.Equal([true], person.Asked.Select(asked => asked.Simulated));
        Assert.Equal(0, _place.Ask<int>("select count(*) from device_outcomes"));
        Assert.Equal(0, _heard.Count("point-started"));
    }

    [Fact]
    public async Task Without_a_serial_nothing_is_started()
    {
        RunSummary summary = await Session(_place.Bench()).Run(new Serials(), Cancel);

        Assert.Empty(summary.Devices);
        Assert.Equal(0, _heard.Count("instrument"));
    }

    [Fact]
    public async Task Several_devices_on_a_bench_of_other_hands_are_refused()
    {
        var refused = await Assert.ThrowsAsync<RefusedException>(
            () => Session(Elsewhere()).Run(new Serials("W1200-0001", "W1200-0002"), Cancel));

        Assert.Equal(RefusalKind.Input, refused.Kind);
        Assert.Contains("one device a call", refused.Message, StringComparison.Ordinal);
        Assert.False(File.Exists(_place.Evidence));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_device_exchanged_by_hand_gets_no_run_before_the_enclosure_was_seen_open_and_closed()
    {
        await using FakeBenchProcess instruments = await FakeBenchProcess.Start(
            _place.Bench(), Workplace.Device, null, TimeProvider.System, Cancel);
        Bench bench = _place.OtherBench(instruments.Links, "by-hand");
        var person = new Person("simulated");
        var session = new RunSession(
            _place.Request(_place.Sequence(Rest), bench), _heard, person, TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        };

        Task<RunSummary> running = session.Run(new Serials("W1200-0001", "W1200-0002"), Cancel);
        await Eventually.True(() => _heard.Count("exchange") == 1, "a request to exchange");
        await instruments.Do("open", Cancel);
        await Eventually.True(() => _heard.Count("enclosure-open") == 1, "an open enclosure");
        Assert.Single(person.Asked);
        await instruments.Do("insert W1200-0002", Cancel);
        await instruments.Do("close", Cancel);
        RunSummary summary = await running;

        Assert.Equal(["W1200-0001", "W1200-0002"], summary.Devices.Select(report => report.Device));
        Assert.Equal([false, true], person.Asked.Select(closing => closing.SeenOpen));
        Assert.Empty(person.Acknowledged);
        Assert.Equal(1, _heard.Count("simulated"));
    }

    [Fact]
    public async Task A_latch_that_stands_refuses_with_what_it_says()
    {
        Bench bench = Elsewhere();
        new LatchFile(bench.Source.Path).Set(DateTimeOffset.UnixEpoch, "the interlock loop is open");

        var refused = await Assert.ThrowsAsync<RefusedException>(
            () => Session(bench).Run(new Serials(Workplace.Device), Cancel));

        Assert.Equal(RefusalKind.Latched, refused.Kind);
        Assert.Contains("the interlock loop is open", refused.Message, StringComparison.Ordinal);
        Assert.Contains("bench clear", refused.Message, StringComparison.Ordinal);
        Assert.False(File.Exists(_place.Evidence));
    }

    [Fact]
    public async Task A_bench_that_another_run_holds_is_refused()
    {
        Bench bench = Elsewhere();
        using BenchLock? held = BenchLock.TryTake(bench.Source.Path, DateTimeOffset.UnixEpoch, out _);

        var refused = await Assert.ThrowsAsync<RefusedException>(
            () => Session(bench).Run(new Serials(Workplace.Device), Cancel));

        Assert.Equal(RefusalKind.Taken, refused.Kind);
        Assert.Contains("in use by process", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_bus_that_somebody_else_charges_while_the_person_is_asked_latches_the_bench()
    {
        await using FakeBenchProcess instruments =
            await FakeBenchProcess.Start(_place.Bench(), Workplace.Device, null, TimeProvider.System, Cancel);
        Bench bench = _place.OtherBench(instruments.Links);
        var latch = new LatchFile(bench.Source.Path);
        var person = new Person("A. Person", async () =>
        {
            await Stranger.Charges(instruments.Links["supply"], 100);
            await Eventually.True(() => latch.Read() is not null, "a latch");
        });
        var session = new RunSession(_place.Request(_place.Sequence(Rest), bench), _heard, person, TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        };

        await Assert.ThrowsAsync<SafetyException>(() => session.Run(new Serials(Workplace.Device), Cancel));

        Assert.Contains("nothing was allowed to charge it", latch.Read(), StringComparison.Ordinal);
        Assert.Equal(0, _heard.Count("point-started"));
        Assert.Equal(0, _place.Ask<int>("select count(*) from captures"));
    }

    [Fact]
    public async Task A_bus_found_charged_latches_the_bench_before_anybody_is_asked()
    {
        await using FakeBenchProcess instruments =
            await FakeBenchProcess.Start(_place.Bench(), Workplace.Device, null, TimeProvider.System, Cancel);
        Bench bench = _place.OtherBench(instruments.Links);
        var person = new Person("A. Person");
        await using (OpenBench open = await OpenBench.Open(
            bench, Workplace.Dialects(bench), null, _heard, InstrumentConnection.Wire, TimeProvider.System, Cancel))
        {
            await Stranger.Charges(instruments.Links["supply"], 100);
            await Eventually.True(async () => (await open.Voltmeter.Read(Cancel)).Value > 90, "a charged bus");
        }

        await Assert.ThrowsAsync<SafetyException>(() =>
            new RunSession(_place.Request(_place.Sequence(Rest), bench), _heard, person, TimeProvider.System)
            {
                Guardian = LivingGuardian.Start,
            }
                .Run(new Serials(Workplace.Device), Cancel));

        Assert.Empty(person.Asked);
        Assert.Contains(
            "nothing was allowed to charge it", new LatchFile(bench.Source.Path).Read(), StringComparison.Ordinal);
    }

    private RunSession Session(Bench bench) =>
        new(_place.Request(_place.Sequence(Rest), bench), _heard, new Person("A. Person"), TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        };

    /// <summary>A bench whose links lead nowhere: port 1 of this machine refuses.</summary>
    private Bench Elsewhere() => _place.OtherBench(
        ((string[])["supply", "pulser", "scope", "voltmeter", "interlock"])
            .ToDictionary(role => role, _ => "tcp 127.0.0.1 1"));
}
