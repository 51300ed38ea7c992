using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Guarding;
using BenchRunner.Runner.Sinks;
using BenchRunner.Safety;
using BenchRunner.Safety.Latches;
using BenchRunner.Safety.Locks;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Runner.Sessions;

/// <summary>A session at one bench: lock and latch, evidence, instruments, confirmation, then device after
/// device.</summary>
public sealed class RunSession
{
    private readonly RunRequest _request;
    private readonly IRunSink _sinks;
    private readonly IOperator _person;
    private readonly TimeProvider _time;
    private readonly DeviceJournal _journal;
    private readonly EventSource _events;
    private readonly LatchFile _latch;

    /// <summary>The bench is watched to the last, so it may trip after the last device's report.</summary>
    private Trip? _trip;

    /// <summary>Makes a session; nothing is opened before <see cref="Run"/>.</summary>
    public RunSession(RunRequest request, IRunSink sinks, IOperator person, TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(request);
        _request = request;
        _sinks = sinks;
        _person = person;
        _time = time;
        _journal = new DeviceJournal(sinks);
        _events = new EventSource("runner", _journal, time);
        _latch = new LatchFile(Bench.Source.Path);
    }

    /// <summary>What quantities and decisions are formed by; a changed result needs a new one.</summary>
    public static string Algorithm => "1";

    /// <summary>Opens every link to an instrument.</summary>
    public LinkOpener Opener { get; init; } = InstrumentConnection.Wire;

    /// <summary>Starts the guardian, without which nothing is energised.</summary>
    public required GuardianStarter Guardian { get; init; }

    private Plan Plan => _request.Plan;

    private Bench Bench => _request.Plan.Bench;

    /// <summary>A bench with a <c>fake:</c> block is new at each start: it leaves no latch and takes no lock.</summary>
    private bool IsNewEachTime => Bench.Fake is not null;

    /// <summary>Runs devices one after the other.</summary>
    /// <param name="devices">Serials, checked; the next is asked for when the one before has ended.</param>
    /// <param name="operatorStop">Cancelled when the operator interrupts.</param>
    /// <exception cref="RefusedException">Refused before anything was energised.</exception>
    /// <exception cref="Evidence.EvidenceException">The evidence cannot be opened.</exception>
    /// <exception cref="InstrumentException">An instrument is of the wrong kind.</exception>
    /// <exception cref="BenchException">The bench is not fit to run on.</exception>
    /// <exception cref="SafetyException">The bench is not safe to begin with.</exception>
    public async Task<RunSummary> Run(IDeviceSource devices, CancellationToken operatorStop)
    {
        ArgumentNullException.ThrowIfNull(devices);
        try
        {
            RunSummary summary = await Work(devices, operatorStop);
            return _trip is { } trip && summary.Devices.All(device => device.Ending != BenchEnding.Tripped)
                ? summary with { BrokenOff = new SafetyException(trip.Reason) } : summary;
        }
        catch (Exception broken) when (_trip is not null && broken is not SafetyException)
        {
            throw new SafetyException(_trip.Reason);
        }
    }

    private async Task<RunSummary> Work(IDeviceSource devices, CancellationToken operatorStop)
    {
        if (!IsNewEachTime && !Bench.ExchangeByHand && devices.Waiting.Count > 1 && !devices.FromReader)
        {
            throw new RefusedException(
                RefusalKind.Input,
                $"bench {Bench.Name} takes one device a call, its file says exchange: none; start a run for each, or "
                    + "write exchange: by-hand where a person exchanges them through the interlocked enclosure");
        }

        using BenchLock? held = IsNewEachTime ? null : TakeBench();
        using EvidenceStore store = EvidenceStore.Open(_request.EvidencePath, _time);
        foreach (ClosedRun closed in store.Closed)
        {
            _events.Say(
                Severity.Warning, "run-closed",
                $"run {closed.Run} of {closed.Device} had no end and was closed as stopped; {closed.Captures} captures "
                    + $"are kept");
        }

        var queue = new DeviceQueue(devices, _request, store, _events, Algorithm);
        queue.RefuseKnown();
        if (await queue.Next(operatorStop) is not { } first)
        {
            return new RunSummary([], [], IsNewEachTime);
        }

        await using FakeBenchProcess? fake = IsNewEachTime
            ? await FakeBenchProcess.Start(Bench, first, _request.Companion, _time, operatorStop) : null;
        // Its process starts while the links are opened; its own links follow, so that it clears no error queue unseen.
        string guardianLog = GuardianLog.PathOf(IsNewEachTime ? _request.EvidencePath : Bench.Source.Path);
        await using IRunGuardian guardian = Guardian(Bench, guardianLog, _time);
        var reports = new InstrumentReports(_events);
        await using OpenBench open = await OpenBench.Open(
            Bench, _request.Dialects, fake?.Links, reports, Opener, _time, operatorStop);
        if (open.IsSimulated && !IsNewEachTime)
        {
            _events.Say(
                Severity.Warning, "simulated", "SIMULATED: the instruments say that they stand in for real ones");
        }

        foreach ((string role, InstrumentIdentity identity) in open.Identities)
        {
            _events.Say(Severity.Information, "instrument", $"{role}: {identity.Text}");
        }

        RefuseUnattended(devices, open);
        await guardian.Begin(fake?.Links, operatorStop);
        await using var supervisor = new SafetySupervisor(
            open.Safety, Bench.Envelope,
            new BusWitness(new Discharge(Bench.Bleeder, Bench.BusCapacitance), Bench.Safety, _time), guardian,
            _events, _time);
        // From here on, also while a person is asked and while a device is exchanged; the mark comes before all else.
        supervisor.TripMarked += LeaveLatch;
        guardian.Follow(supervisor.Witness);

        // Elsewhere a reply that came late costs a repetition. What supply and interlock say is what safety rests on.
        reports.SafetyDoubted += why =>
        {
            if (supervisor.Witness.MayBeEnergised)
            {
                supervisor.TripNow(why);
            }
        };
        await supervisor.Start(operatorStop);
        return await new Shift(
            Plan, store, open, supervisor, fake, _person, queue, new GuardianLogIntake(guardianLog), _sinks, _journal,
            _events, _time).Run(
                first, operatorStop);
    }

    /// <summary>Each closing of a real enclosure wants a person's confirmation: several need a terminal.</summary>
    private void RefuseUnattended(IDeviceSource devices, OpenBench open)
    {
        if (!open.IsSimulated && Bench.ExchangeByHand && !_person.CanAsk
            && (devices.FromReader || devices.Waiting.Count > 0))
        {
            throw new RefusedException(
                RefusalKind.Input,
                "devices exchanged by hand are confirmed at a terminal after each closing, and there is none: give one "
                    + "--device a call; nothing was energised");
        }
    }

    private void LeaveLatch(Trip trip)
    {
        _trip = trip;
        if (IsNewEachTime || !trip.Energised)
        {
            return;
        }

        try
        {
            _latch.Set(trip.At, trip.Reason);
            _events.Say(
                Severity.Alarm, "latched",
                $"the bench is latched ({_latch.Path}); find the cause, then: benchrunner bench clear --bench "
                    + $"{Bench.Source.Path} --by NAME --because TEXT");
        }
        catch (Exception failure) when (failure is IOException or UnauthorizedAccessException)
        {
            // The watch must go on, and the bench be made safe, all the same.
            _events.Say(Severity.Alarm, "latch-not-written", $"THE BENCH IS NOT LATCHED: {failure.Message}; let "
                + $"nobody use it");
        }
    }

    private BenchLock TakeBench()
    {
        if (_latch.Read() is { } said)
        {
            throw new RefusedException(
                RefusalKind.Latched,
                $"a latch stands on bench {Bench.Name}: {said}; find and put right the cause, then: "
                    + $"benchrunner bench clear --bench {Bench.Source.Path} --by NAME --because TEXT");
        }

        return BenchLock.TryTake(Bench.Source.Path, _time.GetUtcNow(), out string? holder)
            ?? throw new RefusedException(
                RefusalKind.Taken, $"bench {Bench.Name} is in use by {holder}; wait until that run has ended");
    }
}
