using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Evidence;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Points;
using BenchRunner.Runner.Sinks;
using BenchRunner.Safety;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Runner.Devices;

/// <summary>Walks one device along the road: points, safe state, decisions, seal.</summary>
/// <remarks>However the points end, the way out leads through the safe state, which takes no caller's token.</remarks>
public sealed class DeviceRun(
    OpenBench bench, SafetySupervisor supervisor, Plan plan, IRunSink sinks, EventSource events, TimeProvider time)
{
    private readonly List<PointTaken> _taken = [];
    private readonly AnalysisSettings _settings = Planner.AnalysisSettingsOf(plan.Bench, plan.Sequence);

    /// <summary>Runs the device of a run that has begun in the evidence.</summary>
    /// <param name="device">Serial.</param>
    /// <param name="evidence">The run.</param>
    /// <param name="operatorStop">Cancelled when the operator interrupts.</param>
    public async Task<DeviceReport> Walk(string device, RunWriter evidence, CancellationToken operatorStop)
    {
        using var stop = CancellationTokenSource.CreateLinkedTokenSource(operatorStop, supervisor.Tripped);
        (BenchEnding ending, Ended? ended) = (BenchEnding.Proved, null);
        try
        {
            await Points(device, evidence, stop.Token);
        }
        catch (Exception broken)
        {
            // All of them: whatever went wrong, the way out leads through the safe state.
            (ending, ended) = Explain(broken, operatorStop);
        }

        SafeStateReport safe = await supervisor.MakeSafe();
        if (!safe.Proved || supervisor.Trip is not null)
        {
            ending = BenchEnding.Tripped;
        }

        if (!safe.Proved)
        {
            // What was found wrong with the device stays found; the bench's own trouble stands beside it.
            ended = new Ended(ended?.Outcome ?? Outcome.Stopped, Join(ended?.Why, "the bus was not proved down"));
        }

        return Report(device, evidence, ending, ended, safe);
    }

    private async Task Points(string device, RunWriter evidence, CancellationToken stop)
    {
        var fixture = new PointFixture(bench, supervisor, plan, evidence, sinks, events, time);
        long start = time.GetTimestamp();
        TimeSpan Left()
        {
            TimeSpan left = TimeSpan.FromSeconds(plan.Duration) - time.GetElapsedTime(start);
            return left > TimeSpan.Zero ? left : TimeSpan.Zero;
        }

        foreach (PlannedPoint point in plan.Points)
        {
            var taken = new PointTaken(point.Point.Name, plan.Bench, _settings);
            _taken.Add(taken);
            await fixture.Take(device, point, taken, Left, stop);
            if (taken.Valid.Count < plan.Sequence.ValidCaptures)
            {
                events.Say(
                    Severity.Warning, "too-few-valid",
                    $"{point.Point.Name}: {taken.Valid.Count} of {plan.Sequence.ValidCaptures} valid captures after "
                        + $"{taken.Taken}");
            }

            // Decided here only where it matters: the bus is charged meanwhile.
            if (MaySkipHigher(point) && Decider.SkipsHigher(plan.Sequence, plan.Bench, taken.ForDecision()))
            {
                events.Say(
                    Severity.Warning, "higher-skipped",
                    $"{point.Point.Name}: a limit failed; the higher points are left out");
                return;
            }
        }
    }

    private bool MaySkipHigher(PlannedPoint point) =>
        point != plan.Points[^1]
        && (point.Point.ElseSkipHigher
            || plan.Sequence.Limits.Any(limit => limit.ElseSkipHigher && limit.At == point.Point.Name));

    /// <summary>What an exception on the road means for bench and device.</summary>
    private (BenchEnding Ending, Ended Ended) Explain(Exception broken, CancellationToken operatorStop)
    {
        if (supervisor.Trip is { } trip)
        {
            return (BenchEnding.Tripped, new Ended(Outcome.Stopped, trip.Reason));
        }

        switch (broken)
        {
            case OperationCanceledException when operatorStop.IsCancellationRequested:
                events.Say(Severity.Warning, "interrupted", "the operator interrupted the run");
                return (BenchEnding.Interrupted, new Ended(Outcome.Stopped, "the operator interrupted the run"));
            case StopException stop:
                supervisor.TripNow(stop.Message);
                return (BenchEnding.Tripped, new Ended(StopOutcome.Of(stop.Finding, plan.Sequence), stop.Message));
            case BusException { StuckInLimit: true } bus when plan.Sequence.Position == DevicePosition.Both:
                supervisor.TripNow(bus.Message);
                return (BenchEnding.Tripped, new Ended(Outcome.Rejected, bus.Message));
            case BusException or PermitException or SafetyException:
                supervisor.TripNow(broken.Message);
                return (BenchEnding.Tripped, new Ended(Outcome.Stopped, broken.Message));
            case LinkException or InstrumentException or BenchException:
                events.Say(Severity.Error, "instrument-failed", broken.Message);
                if (supervisor.Witness.MayBeEnergised && broken is not InstrumentException { Role: "scope" })
                {
                    // What the instrument does is unknown, and unknown counts as energised.
                    supervisor.TripNow(broken.Message);
                }

                return (BenchEnding.InstrumentFailed, new Ended(Outcome.Stopped, broken.Message));
            case EvidenceException:
                events.Say(Severity.Error, "evidence-failed", broken.Message);
                return (BenchEnding.EvidenceFailed, new Ended(Outcome.Stopped, broken.Message));
            default:
                events.Say(Severity.Error, "fault", $"a fault of this program: {broken}");
                return (BenchEnding.Fault, new Ended(Outcome.Stopped, $"a fault of this program: {broken.Message}"));
        }
    }

    private DeviceReport Report(
        string device, RunWriter evidence, BenchEnding ending, Ended? ended, SafeStateReport safe)
    {
        DeviceDecision decision = Decide(ended, ref ending);
        try
        {
            evidence.Finish(decision);
        }
        catch (EvidenceException failed)
        {
            events.Say(Severity.Error, "evidence-failed", failed.Message);
            ending = ending == BenchEnding.Tripped ? ending : BenchEnding.EvidenceFailed;
            decision = decision with { Outcome = Outcome.Stopped, Reason = Join(decision.Reason, failed.Message) };
        }

        foreach (Limit limit in plan.Sequence.Limits)
        {
            sinks.CaseEnded(new Case(device, limit).Result(decision));
        }

        var report = new DeviceReport(
            evidence.Run, device, decision, _taken.Sum(point => point.Taken),
            _taken.Sum(point => point.Valid.Count), ending, safe.Voltage, safe.At);
        sinks.DeviceEnded(report);
        return report;
    }

    /// <summary>Decides from what was taken; how the road was broken off stands above every value.</summary>
    private DeviceDecision Decide(Ended? ended, ref BenchEnding ending)
    {
        try
        {
            DeviceDecision decision = Decider.Decide(
                plan.Sequence, plan.Bench, [.. _taken.Select(point => point.ForDecision())]);
            return ended is null ? decision : decision with { Outcome = ended.Outcome, Reason = ended.Why };
        }
        catch (Exception fault)
        {
            events.Say(Severity.Error, "fault", $"a fault of this program while deciding: {fault}");
            ending = ending == BenchEnding.Proved ? BenchEnding.Fault : ending;
            return new DeviceDecision(Outcome.Stopped, $"a fault of this program while deciding: {fault.Message}", []);
        }
    }

    private static string Join(string? one, string other) => one is null ? other : $"{one}; {other}";
}
