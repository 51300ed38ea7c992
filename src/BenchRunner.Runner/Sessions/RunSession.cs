using System.Runtime.InteropServices;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Exchanges;
using BenchRunner.Runner.Sinks;
using BenchRunner.Safety;
using BenchRunner.Safety.Latches;
using BenchRunner.Safety.Locks;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;

namespace BenchRunner.Runner.Sessions;

/// <summary>A session at one bench: lock and latch, evidence, instruments, confirmation, then device after
/// device.</summary>
public sealed class RunSession
{
    private readonly RunRequest _request;
    private readonly IRunSink _sinks;
    private readonly IConfirmation _confirmation;
    private readonly TimeProvider _time;
    private readonly DeviceJournal _journal;
    private readonly EventSource _events;
    private readonly LatchFile _latch;

    /// <summary>Makes a session; nothing is opened before <see cref="Run"/>.</summary>
    public RunSession(RunRequest request, IRunSink sinks, IConfirmation confirmation, TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(request);
        _request = request;
        _sinks = sinks;
        _confirmation = confirmation;
        _time = time;
        _journal = new DeviceJournal(sinks);
        _events = new EventSource("runner", _journal, time);
        _latch = new LatchFile(Bench.Source.Path);
    }

    /// <summary>What quantities and decisions are formed by; a changed result needs a new one.</summary>
    public static string Algorithm => "1";

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
        if (!IsNewEachTime && devices.Waiting.Count > 1)
        {
            throw new RefusedException(
                RefusalKind.Input, $"bench {Bench.Name} takes one device a call; start a run for each");
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

        if (await devices.Next(operatorStop) is not { } first)
        {
            return new RunSummary([], [], IsNewEachTime);
        }

        Refuse(store, [first, .. devices.Waiting]);

        await using FakeBenchProcess? fake = IsNewEachTime
            ? await FakeBenchProcess.Start(Bench, first, _time, operatorStop) : null;
        await using OpenBench open = await OpenBench.Open(
            Bench, _request.Dialects, fake?.Links, new InstrumentReports(_events), _time, operatorStop);
        foreach ((string role, InstrumentIdentity identity) in open.Identities)
        {
            _events.Say(Severity.Information, "instrument", $"{role}: {identity.Text}");
        }

        await using var supervisor = new SafetySupervisor(
            open.Safety, Bench.Envelope, new Discharge(Bench.Bleeder, Bench.BusCapacitance), _events, _time);
        // From here on, also while a person is asked and while a device is exchanged; the mark comes before all else.
        using CancellationTokenRegistration latching = supervisor.Tripped.Register(() => LeaveLatch(supervisor.Trip!));
        await supervisor.Start(operatorStop);
        return await Devices(first, devices, store, open, supervisor, fake, operatorStop);
    }

    private async Task<RunSummary> Devices(
        string first,
        IDeviceSource devices,
        EvidenceStore store,
        OpenBench open,
        SafetySupervisor supervisor,
        FakeBenchProcess? fake,
        CancellationToken operatorStop)
    {
        var reports = new List<DeviceReport>();
        string device = first;
        while (true)
        {
            string confirmedBy = await Confirm(open, supervisor, operatorStop);
            reports.Add(await One(device, confirmedBy, store, open, supervisor, operatorStop));
            if (reports[^1].Ending != BenchEnding.Proved)
            {
                return new RunSummary(reports, devices.Waiting, open.IsSimulated);
            }

            // A bench whose hands are not ours takes one device a call.
            if (fake is null || await devices.Next(operatorStop) is not { } next)
            {
                return new RunSummary(reports, [], open.IsSimulated);
            }

            device = next;
            await new Exchange(fake, open.Safety.Interlock, _events, _time).Insert(device, operatorStop);
        }
    }

    private async Task<DeviceReport> One(
        string device,
        string confirmedBy,
        EvidenceStore store,
        OpenBench open,
        SafetySupervisor supervisor,
        CancellationToken operatorStop)
    {
        RunWriter evidence = store.BeginRun(Header(device, confirmedBy, open.IsSimulated));
        _journal.Follow(evidence);
        try
        {
            foreach ((string role, InstrumentIdentity identity) in open.Identities)
            {
                evidence.AddInstrument(role, identity.Text, identity.Serial, identity.Firmware);
            }

            _events.Say(Severity.Information, "device-started", $"{device}: run {evidence.Run}");
            return await new DeviceRun(open, supervisor, Plan, _sinks, _events, _time)
                .Walk(device, evidence, operatorStop);
        }
        finally
        {
            _journal.Follow(null);
        }
    }

    private void LeaveLatch(Trip trip)
    {
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
                    + $"{Bench.Source.Path}");
        }
        catch (Exception failure) when (failure is IOException or UnauthorizedAccessException)
        {
            // The watch must go on, and the bench be made safe, all the same.
            _events.Say(Severity.Alarm, "latch-not-written", $"THE BENCH IS NOT LATCHED: {failure.Message}; let "
                + $"nobody use it");
        }
    }

    /// <summary>Refuses a device that is decided in its lot before anything is opened or energised.</summary>
    private void Refuse(EvidenceStore store, IEnumerable<string> devices)
    {
        foreach (string device in devices)
        {
            RunHeader header = Header(device, confirmedBy: null, IsNewEachTime);
            if (store.Refuses(header) is { Kind: not RunRefusalKind.MixedOrigin } refusal)
            {
                throw new RunRefusedException(refusal);
            }
        }
    }

    /// <summary>Asks; a trip does not wait for the answer.</summary>
    private async Task<string> Confirm(OpenBench open, SafetySupervisor supervisor, CancellationToken operatorStop)
    {
        using var stop = CancellationTokenSource.CreateLinkedTokenSource(operatorStop, supervisor.Tripped);
        try
        {
            return await _confirmation.Confirm(Plan, open.IsSimulated, stop.Token)
                ?? throw new RefusedException(RefusalKind.Input, "not confirmed: nothing was energised");
        }
        catch (OperationCanceledException) when (supervisor.Trip is not null)
        {
            throw new SafetyException(supervisor.Trip.Reason);
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

    private RunHeader Header(string device, string? confirmedBy, bool simulated) => new()
    {
        Device = device,
        Lot = _request.Lot,
        Sequence = Plan.Sequence,
        Bench = Bench.Name,
        Files = [Bench.Source, .. _request.Dialects.Values.Select(dialect => dialect.Source)],
        Operator = _request.Operator,
        ArmedBy = confirmedBy,
        Companion = _request.Companion,
        Simulated = simulated,
        Again = _request.Again,
        Algorithm = Algorithm,
        Platform = $"{RuntimeInformation.RuntimeIdentifier} {RuntimeInformation.FrameworkDescription}",
    };
}
