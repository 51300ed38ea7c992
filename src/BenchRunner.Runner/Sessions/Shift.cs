using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Evidence.Placements;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Exchanges;
using BenchRunner.Runner.Guarding;
using BenchRunner.Runner.Sinks;
using BenchRunner.Safety;
using BenchRunner.Safety.Supervision;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Sessions;

/// <summary>Device after device on an open bench: confirmation, run, acknowledgement, exchange.</summary>
internal sealed class Shift(
    Plan plan,
    EvidenceStore store,
    OpenBench open,
    SafetySupervisor supervisor,
    IHands? hands,
    IOperator person,
    DeviceQueue queue,
    GuardianLogIntake guardianLog,
    IRunSink sinks,
    DeviceJournal journal,
    EventSource events,
    TimeProvider time)
{
    private readonly Enclosure _enclosure = new(supervisor, time);
    private readonly List<DeviceReport> _reports = [];

    /// <summary>Waits for a person's exchange; null where no person exchanges.</summary>
    private readonly ByHand? _byHand = hands is null && plan.Bench.ExchangeByHand
        ? new ByHand(new Enclosure(supervisor, time), events, time) : null;

    /// <summary>Runs the first device and all that follow.</summary>
    /// <remarks>What breaks the session off after a first report stands in the summary beside the reports; before it,
    /// it is thrown.</remarks>
    public async Task<RunSummary> Run(string first, CancellationToken operatorStop)
    {
        using var stop = CancellationTokenSource.CreateLinkedTokenSource(operatorStop, supervisor.Tripped);
        var arming = new Arming(supervisor, person, Clamps(), _byHand, events, time);
        string? device = first;
        try
        {
            while (true)
            {
                Confirmation confirmed = await arming.Confirm(plan, device, open.IsSimulated, stop.Token)
                    ?? throw new RefusedException(
                        RefusalKind.Input, $"{device} was not confirmed: nothing was energised for it");
                DeviceReport report = await One(device, confirmed, operatorStop);
                int openings = _enclosure.Openings;
                _reports.Add(report);
                device = null;
                bool goesOn = report.Ending == BenchEnding.Proved;
                await Acknowledge(report, goesOn, goesOn ? stop.Token : operatorStop);

                // A bench whose enclosure nobody opens takes one device a call.
                if (!goesOn || (hands is null && _byHand is null) || await queue.Next(stop.Token) is not { } next)
                {
                    // What trips between the last report and the end belongs to no report.
                    return Summary(
                        device: null,
                        brokenOff: goesOn && supervisor.Trip is { } trip ? new SafetyException(trip.Reason) : null);
                }

                device = next;
                await Exchange(report.Device, next, openings, stop.Token);
            }
        }
        catch (OperationCanceledException) when (supervisor.Trip is not null)
        {
            return Broken(device, new SafetyException(supervisor.Trip.Reason));
        }
        catch (Exception broken) when (_reports.Count > 0)
        {
            return Broken(device, broken);
        }
    }

    private RunSummary Broken(string? device, Exception why) => _reports.Count > 0 ? Summary(device, why) : throw why;

    private RunSummary Summary(string? device, Exception? brokenOff) => new(
        _reports, device is null ? queue.Waiting : [device, .. queue.Waiting], open.IsSimulated, brokenOff);

    private Task Exchange(string before, string next, int openings, CancellationToken stop) => hands is not null
        ? new Exchange(hands, _enclosure, events, time).Insert(next, stop)
        : _byHand!.Exchange(before, next, openings, stop);

    private async Task<DeviceReport> One(string device, Confirmation confirmed, CancellationToken operatorStop)
    {
        RunWriter evidence = store.BeginRun(queue.Header(device, confirmed.By, open.IsSimulated));
        journal.Follow(evidence);
        try
        {
            foreach (BenchEvent done in guardianLog.Take(evidence, time.GetUtcNow()))
            {
                sinks.Receive(done);
            }

            foreach ((string role, InstrumentIdentity identity) in open.Identities)
            {
                evidence.AddInstrument(role, identity.Text, identity.Serial, identity.Firmware);
            }

            events.Say(Severity.Information, "device-started", $"{device}: run {evidence.Run}");
            SayClamps(confirmed);
            return await new DeviceRun(open, supervisor, plan, sinks, events, time)
                .Walk(device, evidence, operatorStop);
        }
        finally
        {
            journal.Follow(null);
        }
    }

    /// <summary>Channels whose clamps only a person can degauss.</summary>
    private IReadOnlyList<string> Clamps() => open.Scope.CanDegauss ? [] :
    [
        .. plan.Bench.Channels.Where(setup => setup.Probe == ChannelSetup.Clamp).Select(setup => setup.Channel.Name()),
    ];

    private void SayClamps(Confirmation confirmed)
    {
        if (Clamps() is { Count: > 0 } clamps)
        {
            events.Say(
                confirmed.Asked ? Severity.Information : Severity.Warning,
                confirmed.Asked ? "degauss-asked" : "degauss-not-asked",
                $"the scope cannot degauss the clamp of {string.Join(", ", clamps)}: "
                    + (confirmed.Asked ? "the operator was asked to" : "nobody was asked to; its zero may be off"));
        }
    }

    /// <summary>Has the person say where a device that was not accepted was put, and stores it.</summary>
    /// <exception cref="RefusedException">The person has left, and devices wait.</exception>
    private async Task Acknowledge(DeviceReport report, bool goesOn, CancellationToken stop)
    {
        if (report.Decision.Outcome == Outcome.Accepted || open.IsSimulated)
        {
            return;
        }

        string? why = supervisor.Witness.MayBeEnergised ? "it stays in the closed enclosure, the bus is not proved down"
            : report.Ending == BenchEnding.EvidenceFailed ? "the evidence takes nothing more"
            : report.Ending == BenchEnding.Interrupted ? "the operator interrupted the run"
            : !person.CanAsk ? "there is no terminal to ask at" : null;
        if (why is null && await person.WherePut(report, stop) is { } put)
        {
            store.AddPlacement(new Placement(report.Run, put, queue.Operator));
            events.Say(Severity.Information, "acknowledged", $"{report.Device} was put: {put}");
            return;
        }

        events.Say(
            Severity.Warning, "not-acknowledged",
            $"nobody said where {report.Device} was put: {why ?? "the operator has left"}");
        if (why is null && goesOn && (queue.FromReader || queue.Waiting.Count > 0))
        {
            throw new RefusedException(
                RefusalKind.Input, $"the outcome of {report.Device} was not acknowledged; no further device is run");
        }
    }
}
