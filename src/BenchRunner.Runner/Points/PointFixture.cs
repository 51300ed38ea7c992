using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Proving;
using BenchRunner.Runner.Sinks;
using BenchRunner.Runner.Temperatures;
using BenchRunner.Safety;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Points;

/// <summary>Fires at one operating point until the wanted number of captures is valid; the point's cases share what it
/// takes.</summary>
/// <remarks>
/// The only loop of the road. Each capture is durable before anything is computed from it. Storing and analysing it
/// goes on while the bus recharges and the pause passes; the next train is not fired before the capture is durable, has
/// passed every criterion that stops, and the width correction is known.
/// </remarks>
/// <param name="work">The device's work.</param>
/// <param name="zeros">Takes a new zero where captures keep beginning with a current.</param>
/// <param name="holds">Holds at each new bus voltage.</param>
/// <param name="analyse">Analyses a capture.</param>
public sealed class PointFixture(
    DeviceWork work,
    ZeroCaptures zeros,
    LeakageHolds holds,
    Func<IReadOnlyList<RawTrace>, AnalysisSettings, AnalysisResult> analyse)
{
    private const int MostLostInARow = 3;
    private const int NewZeroAfter = 3;

    /// <summary>Brings the bus to the point's voltage and takes its captures.</summary>
    /// <param name="planned">The point.</param>
    /// <param name="taken">Takes what is captured, also when the work is broken off.</param>
    /// <param name="left">Time left by the plan, for the live line.</param>
    /// <param name="cancel">Ends the work: operator or trip.</param>
    /// <exception cref="StopException">A criterion of class stop was not met.</exception>
    /// <exception cref="DeviceFaultException">The device leaks.</exception>
    public async Task Take(PlannedPoint planned, PointTaken taken, Func<TimeSpan> left, CancellationToken cancel)
    {
        OperatingPoint point = planned.Point;
        Permit permit = await work.Supervisor.Grant(work.Bounds(planned), cancel);
        work.Events.Say(
            Severity.Information, "point-started",
            $"{point.Name}: {SiText.Format(point.BusVoltage, "V")}, {SiText.Format(point.LoadCurrent, "A")}; "
                + "charging the bus");
        var state = new PointState(planned, taken);

        // Gates at their off level before there is any voltage for them to hold off.
        await work.Bench.Pulser.Program(permit, DeviceWork.Train(state.Set), cancel);
        await work.Firing.Prepare(Scope(state), cancel);
        state.Count = await work.Firing.Count(cancel);
        await work.Bench.Safety.Interlock.ReleaseBleeder(permit, cancel);
        await work.Bus.Up(permit, planned, cancel);
        await holds.Hold(permit, point, cancel);

        // Charged, and before the first train: nobody else has a hand on the instruments. What the point before had set
        // was asked back before anything of it was overwritten.
        await work.Bench.Supply.CheckSettings(cancel);
        await work.Bench.Pulser.CheckSettings(cancel);
        await work.Firing.CheckScope(cancel);
        await Captures(permit, state, left, cancel);
    }

    private async Task Captures(Permit permit, PointState state, Func<TimeSpan> left, CancellationToken cancel)
    {
        PointTaken taken = state.Taken;
        Task judging = Task.CompletedTask;
        while (true)
        {
            using var enough = new CancellationTokenSource();
            Task<double> turn = work.Bus.WaitForTurn(work.Firing, state, enough.Token, cancel);
            try
            {
                await judging;
                if (!IsWanting(taken))
                {
                    return;
                }

                work.Sinks.Progress(new RunProgress(
                    work.Device, state.Planned.Point.Name, taken.Taken + 1, work.Plan.Sequence.CapturesAtMost,
                    taken.Valid.Count, work.Plan.Sequence.ValidCaptures, work.Supervisor.LastVoltage,
                    work.Supervisor.LastInterlock, left()));
                double voltmeter = await turn;
                await PutRight(permit, state, cancel);
                judging = await FireOne(permit, state, voltmeter, cancel);
            }
            finally
            {
                // Nobody may be left reading the voltmeter while the bench is made safe.
                enough.Cancel();
                await ((Task)turn).ConfigureAwait(
                    ConfigureAwaitOptions.SuppressThrowing | ConfigureAwaitOptions.ContinueOnCapturedContext);
            }
        }
    }

    private bool IsWanting(PointTaken taken) =>
        taken.Taken < work.Plan.Sequence.CapturesAtMost
        && (taken.Valid.Count < work.Plan.Sequence.ValidCaptures
            || (work.Plan.Sequence.UntilDecided
                && !Decider.IsEverythingDecided(work.Plan.Sequence, work.Plan.Bench, taken.ForDecision())));

    /// <summary>What the capture before asks for: a new zero, the plate back at its temperature, another
    /// width.</summary>
    private async Task PutRight(Permit permit, PointState state, CancellationToken cancel)
    {
        if (state.BaselineInARow >= NewZeroAfter)
        {
            await zeros.Again(Scope(state), cancel);
            state.BaselineInARow = 0;
            state.Count = await work.Firing.Count(cancel);
        }

        if (state is { PlateIsOff: true, Planned.Point.Temperature: { } wanted })
        {
            work.Supervisor.Progress("waiting for the plate", Plate.ReturnsWithin);
            await work.Plate.Return(wanted, work.Plan.Sequence.Validity.TemperatureWithin, cancel);
        }

        if (state.TrainChanged)
        {
            await work.Bench.Pulser.Program(permit, DeviceWork.Train(state.Set), cancel);
            state.TrainChanged = false;
        }
    }

    /// <summary>Fires one train.</summary>
    /// <returns>The work of storing and judging its capture, under way.</returns>
    private async Task<Task> FireOne(Permit permit, PointState state, double voltmeter, CancellationToken cancel)
    {
        double? plate = await work.Plate.Measured(cancel);
        DateTimeOffset at = work.Time.GetUtcNow();
        state.Taken.Taken++;
        ScopeRecord? record = await work.Firing.Fire(permit, Scope(state), cancel);
        if (record is null || record.Traces.Count == 0)
        {
            return ++state.LostInARow >= MostLostInARow
                ? throw new InstrumentException(
                    "scope", $"{MostLostInARow} trains in a row left no record; check trigger and link")
                : Task.CompletedTask;
        }

        state.LostInARow = 0;
        var capture = new CaptureRow(
            state.Planned.Point.Name, state.Taken.Taken, at, record.Traces, voltmeter,
            plate ?? work.Plan.Bench.Ambient, state.Set)
        {
            CountBefore = state.Count,
            CountAfter = record.Count,
        };
        return Background.Start(() =>
        {
            StoreAndJudge(capture, record, plate, state);
            return Task.CompletedTask;
        });
    }

    private void StoreAndJudge(CaptureRow capture, ScopeRecord record, double? plate, PointState state)
    {
        long id = work.Evidence.AddCapture(capture);
        AnalysisResult result = analyse(record.Traces, work.Settings);
        CaptureContext context = state.Context(work, record, result, capture.BusVoltage, plate);
        Verdict verdict = CaptureValidity.Judge(context);
        work.Evidence.AddVerdict(id, verdict, result.Train.OffCurrent, result.Train.BusBeforeOn1);
        work.Evidence.AddCaptureValues(id, result.Quantities);
        string label = $"{capture.OperatingPoint} capture {capture.Number}";
        CaptureWords.Say(work.Events, label, verdict, result.Train.OffCurrent);
        state.Taken.Judged(verdict);
        if (verdict.Stop is not null)
        {
            throw new StopException(StopOutcome.Of(context, verdict));
        }

        if (MeasuredEnvelope.Exceeded(record.Traces, work.Plan.Bench, work.Plan.Sequence.Ratings) is { } exceeded)
        {
            throw new SafetyException($"{label}: {exceeded}; no further train is fired");
        }

        if (verdict.IsValid)
        {
            state.Taken.Add(new ValidCapture(capture.Number, record.Traces, result));
        }

        state.Follow(record, verdict);
    }

    private ScopeSettings Scope(PointState state) => work.Scope(state.Planned, state.Ranges);
}
