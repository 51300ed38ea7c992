using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Points;
using BenchRunner.Runner.Proving;
using BenchRunner.Runner.Sessions;
using BenchRunner.Runner.Tests.Workplaces;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Watches;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Tests.Points;

/// <summary>What happens while a capture is analysed, shown by an analysis that waits until it is let go.</summary>
public sealed class SlowAnalysisTests : IDisposable
{
    private const string Rest = """
        captures: { valid: 2, at-most: 2 }
        limits:
          - { quantity: eon, at: half, at-most: 1 mJ }
        """;

    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();
    private readonly PauseClock _time = new(TimeSpan.FromSeconds(2));
    private readonly SemaphoreSlim _entered = new(0);
    private readonly SemaphoreSlim _letGo = new(0);

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose()
    {
        _place.Dispose();
        _entered.Dispose();
        _letGo.Dispose();
    }

    [Fact]
    public async Task The_pause_passes_meanwhile_and_no_train_is_fired_before_the_verdict()
    {
        Sequence sequence = _place.Sequence(Rest);
        sequence = sequence with { OperatingPoints = [sequence.OperatingPoints[0] with { RepeatEvery = 2 }] };
        Bench bench = _place.Bench();
        RunRequest request = _place.Request(sequence, bench);
        await using FakeBenchProcess fake = await FakeBenchProcess.Start(
            bench, Workplace.Device, null, TimeProvider.System, Cancel);
        var events = new EventSource("runner", _heard, _time);
        await using OpenBench open = await OpenBench.Open(
            bench, request.Dialects, fake.Links, new InstrumentReports(events), InstrumentConnection.Wire, TimeProvider.System,
            Cancel);
        await using var supervisor = new SafetySupervisor(
            open.Safety, bench.Envelope, new BusWitness(
                new Discharge(bench.Bleeder, bench.BusCapacitance), bench.Safety, TimeProvider.System),
            new Guardian(), events, TimeProvider.System);
        await supervisor.Start(Cancel);
        using EvidenceStore store = EvidenceStore.Open(_place.Evidence, TimeProvider.System);
        var work = new DeviceWork(
            Workplace.Device, open, supervisor, request.Plan, store.BeginRun(Header(sequence, bench)), _heard, events,
            _time);
        var fixture = new PointFixture(work, new ZeroCaptures(work), new LeakageHolds(work), Slowly);
        var taken = new PointTaken("half", bench, work.Settings);

        Task taking = fixture.Take(request.Plan.Points[0], taken, () => TimeSpan.Zero, Cancel);
        Assert.True(await _entered.WaitAsync(TimeSpan.FromSeconds(60), Cancel));

        // The first capture is durable before it is analysed; the pause passes while it is.
        Assert.Equal(1, _place.Ask<int>("select count(*) from capture"));
        await Eventually.True(() => _time.PausesEnded == 1, "the end of the pause");
        Assert.Equal(1, await open.Pulser.ReadCount(Cancel));
        Assert.Equal(0, _heard.Count("capture-valid"));

        _letGo.Release();
        Assert.True(await _entered.WaitAsync(TimeSpan.FromSeconds(60), Cancel));

        // The second train had no pause of its own: it had passed.
        Assert.Equal(1, _time.PausesEnded);
        Assert.Equal(2, await open.Pulser.ReadCount(Cancel));
        Assert.Equal(1, _heard.Count("capture-valid"));
        _letGo.Release();
        await taking;

        Assert.Equal(2, taken.Valid.Count);
        Assert.True((await supervisor.MakeSafe()).Proved);
    }

    private AnalysisResult Slowly(IReadOnlyList<RawTrace> traces, AnalysisSettings settings)
    {
        _entered.Release();
        _letGo.Wait(Cancel);
        return CaptureAnalysis.Of(traces, settings);
    }

    private static RunHeader Header(Sequence sequence, Bench bench) => new()
    {
        Device = Workplace.Device,
        Sequence = sequence,
        Bench = bench.Name,
        Simulated = true,
        Algorithm = RunSession.Algorithm,
        Platform = "any",
    };

    /// <summary>The system's clock, which counts the long pauses that have ended.</summary>
    private sealed class PauseClock(TimeSpan about) : TimeProvider
    {
        private int _ended;

        public int PausesEnded => Volatile.Read(ref _ended);

        public override ITimer CreateTimer(TimerCallback callback, object? state, TimeSpan dueTime, TimeSpan period)
        {
            // A pause is counted from the train: some of it has passed when the wait begins.
            bool isPause = period == Timeout.InfiniteTimeSpan && dueTime > about / 2 && dueTime <= about;
            return base.CreateTimer(
                isPause
                    ? given =>
                    {
                        callback(given);
                        Interlocked.Increment(ref _ended);
                    }
            : callback,
                state, dueTime, period);
        }
    }
}
