using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Sinks;
using BenchRunner.Safety;
using BenchRunner.Safety.Supervision;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;
using BenchRunner.Signals.Units;

namespace BenchRunner.Runner.Points;

/// <summary>Fires at one operating point until the wanted number of captures is valid; the point's cases share what it
/// takes.</summary>
/// <remarks>
/// The only loop of the road. Each capture is durable before anything is computed from it, and the next train is not
/// fired before it has passed every criterion that stops.
/// </remarks>
public sealed class PointFixture
{
    private const int MostLostInARow = 3;

    private readonly OpenBench _bench;
    private readonly SafetySupervisor _supervisor;
    private readonly Plan _plan;
    private readonly RunWriter _evidence;
    private readonly IRunSink _sinks;
    private readonly EventSource _events;
    private readonly TimeProvider _time;
    private readonly BusCharge _bus;
    private readonly TrainFiring _firing;
    private readonly AnalysisSettings _settings;

    /// <summary>Makes the fixture of a device's run.</summary>
    public PointFixture(
        OpenBench bench,
        SafetySupervisor supervisor,
        Plan plan,
        RunWriter evidence,
        IRunSink sinks,
        EventSource events,
        TimeProvider time)
    {
        _bench = bench;
        _supervisor = supervisor;
        _plan = plan;
        _evidence = evidence;
        _sinks = sinks;
        _events = events;
        _time = time;
        _bus = new BusCharge(bench, plan.Bench, supervisor.Witness, time);
        _firing = new TrainFiring(bench, events, time);
        _settings = Planner.AnalysisSettingsOf(plan.Bench, plan.Sequence);
    }

    /// <summary>Brings the bus to the point's voltage and takes its captures.</summary>
    /// <param name="device">Serial, for the live line.</param>
    /// <param name="planned">The point.</param>
    /// <param name="taken">Takes what is captured, also when the work is broken off.</param>
    /// <param name="left">Time left by the plan, for the live line.</param>
    /// <param name="cancel">Ends the work: operator or trip.</param>
    /// <exception cref="StopException">A criterion of class stop was not met.</exception>
    public async Task Take(
        string device, PlannedPoint planned, PointTaken taken, Func<TimeSpan> left, CancellationToken cancel)
    {
        OperatingPoint point = planned.Point;
        Permit permit = await _supervisor.Grant(Bounds(planned), cancel);
        _events.Say(
            Severity.Information, "point-started",
            $"{point.Name}: {SiText.Format(point.BusVoltage, "V")}, {SiText.Format(point.LoadCurrent, "A")}; "
                + "charging the bus");
        var state = new PointState(planned, taken);

        // Gates at their off level before there is any voltage for them to hold off.
        await _bench.Pulser.Program(permit, Train(state.Set), cancel);
        await _firing.Prepare(Scope(state), cancel);
        state.Count = await _firing.Count(cancel);
        await _bench.Safety.Interlock.ReleaseBleeder(permit, cancel);
        await _bus.Up(permit, planned, cancel);
        while (IsWanting(taken))
        {
            _sinks.Progress(new RunProgress(
                device, point.Name, taken.Taken + 1, _plan.Sequence.CapturesAtMost, taken.Valid.Count,
                _plan.Sequence.ValidCaptures, _supervisor.LastVoltage, _supervisor.LastInterlock, left()));
            await TakeOne(permit, state, cancel);
        }
    }

    private bool IsWanting(PointTaken taken) =>
        taken.Taken < _plan.Sequence.CapturesAtMost
        && (taken.Valid.Count < _plan.Sequence.ValidCaptures
            || (_plan.Sequence.UntilDecided
                && !Decider.IsEverythingDecided(_plan.Sequence, _plan.Bench, taken.ForDecision())));

    private async Task TakeOne(Permit permit, PointState state, CancellationToken cancel)
    {
        double voltmeter = await WaitForTurn(state, cancel);
        DateTimeOffset at = _time.GetUtcNow();
        state.Taken.Taken++;
        ScopeRecord? record = await _firing.Fire(permit, Scope(state), cancel);
        if (record is null || record.Traces.Count == 0)
        {
            if (++state.LostInARow >= MostLostInARow)
            {
                throw new InstrumentException(
                    "scope", $"{MostLostInARow} trains in a row left no record; check trigger and link");
            }

            return;
        }

        state.LostInARow = 0;
        long id = _evidence.AddCapture(new CaptureRow(
            state.Planned.Point.Name, state.Taken.Taken, at, record.Traces, voltmeter, _plan.Bench.Ambient, state.Set));
        Judge(id, record, voltmeter, state);
        if (state.TrainChanged)
        {
            await _bench.Pulser.Program(permit, Train(state.Set), cancel);
            state.TrainChanged = false;
        }
    }

    private void Judge(long id, ScopeRecord record, double voltmeter, PointState state)
    {
        AnalysisResult result = CaptureAnalysis.Of(record.Traces, _settings);
        Verdict verdict = CaptureValidity.Judge(new CaptureContext
        {
            Planned = state.Planned,
            Sequence = _plan.Sequence,
            Bench = _plan.Bench,
            Set = state.Set,
            Traces = record.Traces,
            Previous = state.Previous,
            CountBefore = state.Count,
            CountAfter = record.Count,
            StaleBefore = state.StaleInARow,
            Analysis = result,
            Voltmeter = voltmeter,
        });
        _evidence.AddVerdict(id, verdict, result.Train.OffCurrent, result.Train.BusBeforeOn1);
        _evidence.AddCaptureValues(id, result.Quantities);
        string label = $"{state.Planned.Point.Name} capture {state.Taken.Taken}";
        Say(label, verdict, result.Train.OffCurrent);
        if (verdict.Stop is { } stop)
        {
            throw new StopException(stop);
        }

        if (MeasuredEnvelope.Exceeded(record.Traces, _plan.Bench, _plan.Sequence.Ratings) is { } exceeded)
        {
            throw new SafetyException($"{label}: {exceeded}; no further train is fired");
        }

        if (verdict.IsValid)
        {
            state.Taken.Add(new ValidCapture(state.Taken.Taken, record.Traces, result));
        }

        state.Follow(record, verdict);
    }

    private void Say(string capture, Verdict verdict, double? offCurrent)
    {
        string current = offCurrent is { } amperes ? SiText.Format(amperes, "A") : "no current";
        string label = $"{capture}: {current}";
        if (verdict.Findings.Count == 0)
        {
            _events.Say(Severity.Information, "capture-valid", $"{label}, valid");
        }

        foreach (Finding finding in verdict.Findings)
        {
            (Severity severity, string kind) = finding.Class switch
            {
                FindingClass.Warn => (Severity.Warning, "capture-warning"),
                FindingClass.Retry => (Severity.Warning, "capture-rejected"),
                _ => (Severity.Error, "capture-stops"),
            };
            _events.Say(severity, kind, $"{label}, {finding.Criterion}: {finding.Message}");
        }
    }

    /// <summary>Waits until the next train is due and the bus is back.</summary>
    /// <returns>The voltmeter's reading, V.</returns>
    private async Task<double> WaitForTurn(PointState state, CancellationToken cancel)
    {
        if (_firing.FiredAt is { } fired)
        {
            double due = Math.Max(state.Planned.Point.RepeatEvery, state.Planned.Recovery);
            TimeSpan wait = TimeSpan.FromSeconds(due) - _time.GetElapsedTime(fired);
            if (wait > TimeSpan.Zero)
            {
                await Task.Delay(wait, _time, cancel);
            }
        }

        return await _bus.WaitFor(state.Planned.Point.BusVoltage, cancel);
    }

    private PermitBounds Bounds(PlannedPoint planned)
    {
        OperatingPoint point = planned.Point;
        double longest = Math.Max(planned.FirstPulse * (1 + WidthCorrection.InAll), point.SecondPulse);
        return new PermitBounds(
            point.Name, new Volts(point.BusVoltage), new Amperes(_plan.Bench.ChargingCurrent),
            new Seconds(Math.Min(longest, _plan.Bench.Envelope.Pulse)), new Volts(point.GateOn),
            new Volts(point.GateOff));
    }

    private static TrainSettings Train(TrainSet set) => new(
        new Seconds(set.First), new Seconds(set.Gap), new Seconds(set.Second), new Volts(set.GateOn),
        new Volts(set.GateOff));

    private static ScopeSettings Scope(PointState state) => new(
        new Seconds(state.Planned.SampleInterval),
        state.Planned.Samples,
        new Seconds(state.Planned.Pretrigger),
        Channel.VgsLow,
        0.5 * (state.Set.GateOn + state.Set.GateOff),
        [.. state.Ranges.Select(range =>
            new ScopeChannelSettings(range.Channel, range.Input, range.Span, range.Offset))]);
}
