using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Points;
using BenchRunner.Runner.Proving;
using BenchRunner.Runner.Sinks;
using BenchRunner.Runner.Temperatures;
using BenchRunner.Safety;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;

namespace BenchRunner.Runner.Devices;

/// <summary>Walks one device along the road: points, safe state, decisions, seal.</summary>
/// <remarks>However the points end, the way out leads through the safe state, which takes no caller's token.</remarks>
public sealed class DeviceRun(
    OpenBench bench, SafetySupervisor supervisor, Plan plan, IRunSink sinks, EventSource events, TimeProvider time)
{
    private readonly List<PointTaken> _taken = [];

    /// <summary>Whether every point was run and the device goes through its second proving.</summary>
    private bool _measured;

    /// <summary>What the bus was charged to last, V.</summary>
    private double _charged;

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
            await Road(
                new DeviceWork(device, bench, supervisor, plan, evidence, sinks, events, time), stop.Token);
        }
        catch (Exception broken)
        {
            // All of them: whatever went wrong, the way out leads through the safe state.
            (ending, ended) = await Explain(broken, operatorStop);
        }

        SafeStateReport safe = await supervisor.MakeSafe();
        supervisor.EndConfirmed();
        if (supervisor.Trip is { } trip)
        {
            // Also where it came after the last train: a run that safety ended decides nothing.
            ending = BenchEnding.Tripped;
            ended ??= new Ended(Outcome.Stopped, trip.Reason);
        }

        if (!safe.Proved)
        {
            ending = BenchEnding.Tripped;

            // What was found wrong with the device stays found; the bench's own trouble stands beside it.
            ended = new Ended(ended?.Outcome ?? Outcome.Stopped, Join(ended?.Why, "the bus was not proved down"));
        }

        return Report(device, evidence, ending, ended, safe, await LastPlate());
    }

    /// <summary>Zero, proving train, points by rising voltage, proving train again.</summary>
    private async Task Road(DeviceWork work, CancellationToken stop)
    {
        var zeros = new ZeroCaptures(work);
        var proving = new ProvingTrains(work);
        await zeros.First(stop);
        await proving.Take(UncountedPoints.ProvingBefore, stop);
        await Points(work, new PointFixture(work, zeros, new LeakageHolds(work), CaptureAnalysis.Of), stop);
        _measured = true;

        // A device that its last train killed is found while the supply still feeds the bank: afterwards an empty bank and
        // an open lead look alike. So it is after the last proving train.
        await work.Bus.WaitFor(_charged, stop);
        await Down(stop);
        await work.Bus.WaitBelow(ProvingTrain.BusVoltage, stop);
        await proving.Take(UncountedPoints.ProvingAfter, stop);
        await work.Bus.WaitFor(ProvingTrain.BusVoltage, stop);
    }

    private async Task Down(CancellationToken stop)
    {
        SafeStateReport down = await supervisor.MakeSafe();
        stop.ThrowIfCancellationRequested();
        if (!down.Proved)
        {
            throw new SafetyException("the bus was not proved down");
        }
    }

    private async Task Points(DeviceWork work, PointFixture fixture, CancellationToken stop)
    {
        long start = time.GetTimestamp();
        TimeSpan Left()
        {
            TimeSpan left = TimeSpan.FromSeconds(plan.Duration) - time.GetElapsedTime(start);
            return left > TimeSpan.Zero ? left : TimeSpan.Zero;
        }

        double? heated = double.NaN;
        foreach (PlannedPoint point in plan.Points)
        {
            if (point.Point.BusVoltage < _charged)
            {
                // A supply gives and does not take: only the bleeder brings a bus down.
                await Down(stop);
            }

            _charged = point.Point.BusVoltage;
            if (point.Point.Temperature != heated)
            {
                heated = point.Point.Temperature;
                await Soak(work, heated, stop);
            }

            var taken = new PointTaken(point.Point.Name, plan.Bench, work.Settings);
            _taken.Add(taken);
            await fixture.Take(point, taken, Left, stop);
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

    /// <summary>What the plate has when its heater is off, for who reaches into the fixture next.</summary>
    private async Task<double?> LastPlate()
    {
        try
        {
            return await new Plate(bench.Hotplate, plan.Bench.Ambient, events, time).Measured(CancellationToken.None);
        }
        catch (Exception silent)
        {
            // Whatever it is: the bench is safe, and the run must get its decision and its seal.
            events.Say(Severity.Warning, "plate-unknown", $"the plate's temperature is not known: {silent.Message}");
            return null;
        }
    }

    /// <summary>A plate takes minutes: nothing stays charged meanwhile.</summary>
    private async Task Soak(DeviceWork work, double? temperature, CancellationToken stop)
    {
        if (bench.Hotplate is null)
        {
            return;
        }

        await Down(stop);
        await work.Plate.Settle(
            temperature, plan.Sequence.Validity.TemperatureWithin, plan.Sequence.Soak, stop);
    }

    private bool MaySkipHigher(PlannedPoint point) =>
        point != plan.Points[^1]
        && (point.Point.ElseSkipHigher
            || plan.Sequence.Limits.Any(limit => limit.ElseSkipHigher && limit.At == point.Point.Name));

    /// <summary>What an exception on the road means for bench and device.</summary>
    private async Task<(BenchEnding Ending, Ended Ended)> Explain(Exception broken, CancellationToken operatorStop)
    {
        if (broken is BusException or InstrumentException or LinkException)
        {
            // A supply that the interlock has switched off refuses too: the first reason is the one behind it.
            await supervisor.LookForRootCause();
        }

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
                return Stopped(stop.Outcome, stop.Message);
            case BusException { StuckInLimit: true } bus:
                return Stopped(StopOutcome.OfShort(plan.Sequence), bus.Message);
            case SettingChangedException changed:
                return Stopped(Outcome.Stopped, changed.Message);
            case DeviceFaultException fault:
                return (BenchEnding.Proved, new Ended(Outcome.Rejected, fault.Message));
            case BusException or PermitException or SafetyException:
                supervisor.TripNow(broken.Message);
                return (BenchEnding.Tripped, new Ended(Outcome.Stopped, broken.Message));
            case LinkException or InstrumentException or BenchException:
                events.Say(Severity.Error, "instrument-failed", broken.Message);
                if (supervisor.Witness.MayBeEnergised && broken is not InstrumentException { Role: "scope" })
                {
                    // What the instrument does is unknown, and unknown counts as energised.
                    Action<string> end = broken is LinkException ? supervisor.ReplyLost : supervisor.TripNow;
                    end(broken.Message);
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

    /// <summary>A bench that is not what its files say trips; so does a device that fails above 60 V. One that is found
    /// faulty below is taken out, and the day goes on.</summary>
    private (BenchEnding Ending, Ended Ended) Stopped(Outcome outcome, string why)
    {
        var ended = new Ended(outcome, why);
        if (outcome == Outcome.Rejected && !supervisor.Witness.MayBeEnergised)
        {
            return (BenchEnding.Proved, ended);
        }

        supervisor.TripNow(why);
        return (BenchEnding.Tripped, ended);
    }

    private DeviceReport Report(
        string device, RunWriter evidence, BenchEnding ending, Ended? ended, SafeStateReport safe, double? plate)
    {
        foreach (RejectedShare share in RejectedShares.Of([.. _taken.SelectMany(point => point.Verdicts)]))
        {
            events.Say(
                share.IsAboveHalf ? Severity.Warning : Severity.Information, "criterion-counted", share.Message);
        }

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
            _taken.Sum(point => point.Valid.Count), ending, safe.Voltage, safe.At, plate)
        {
            BusProved = safe.Proved,
            BusEnergyAtMost = safe.EnergyAtMost,
        };
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
            return ended is null ? decision
                : !(_measured && ended.Outcome == Outcome.Rejected)
                    ? decision with { Outcome = ended.Outcome, Reason = ended.Why }
                : new DeviceDecision(
                    ended.Outcome, $"did not survive its measurement: {ended.Why}",
                    [.. decision.Values.Select(value => value with
                    {
                        Reason = Join(value.Reason, "the device did not survive its measurement"),
                    })]);
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
