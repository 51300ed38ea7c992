using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Points;
using BenchRunner.Safety;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Runner.Proving;

/// <summary>Trains below 60 V DC that show, before high voltage and after, that bench and device are what the files
/// say.</summary>
public sealed class ProvingTrains(DeviceWork work)
{
    /// <summary>Trains fired until one can be judged.</summary>
    private const int Tries = 3;

    /// <summary>Takes the bus to its low voltage and fires until a train can be judged; leaves the bus there.</summary>
    /// <param name="name"><c>proving-before</c> or <c>proving-after</c>.</param>
    /// <param name="cancel">Ends the work: operator or trip.</param>
    /// <exception cref="StopException">A train shows a fault of bench or device.</exception>
    /// <exception cref="BusException">The bus does not come up: a position is shorted.</exception>
    /// <exception cref="BenchException">No train could be judged.</exception>
    public async Task Take(string name, CancellationToken cancel)
    {
        PlannedPoint planned = work.Plan.Proving with { Point = work.Plan.Proving.Point with { Name = name } };
        Permit permit = await work.Supervisor.Grant(work.Bounds(planned), cancel);
        work.Events.Say(
            Severity.Information, "proving-started",
            $"{name}: {SiText.Format(planned.Point.BusVoltage, "V")}, {SiText.Format(planned.Point.LoadCurrent, "A")}");
        var state = new PointState(planned, new PointTaken(name, work.Plan.Bench, work.Settings));
        await work.Bench.Pulser.Program(permit, DeviceWork.Train(state.Set), cancel);
        await work.Firing.Prepare(work.Scope(planned, state.Ranges), cancel);
        state.Count = await work.Firing.Count(cancel);
        await work.Bench.Safety.Interlock.ReleaseBleeder(permit, cancel);
        await work.Bus.Up(permit, planned, cancel);
        for (int i = 1; i <= Tries; i++)
        {
            if (await Fire(permit, state, i, cancel))
            {
                return;
            }
        }

        throw new BenchException(
            $"{name}: {Tries} trains and none that could be judged; see the findings, and look at what they name");
    }

    private async Task<bool> Fire(Permit permit, PointState state, int number, CancellationToken cancel)
    {
        double voltmeter = await work.Bus.WaitForTurn(work.Firing, state, default, cancel);
        DateTimeOffset at = work.Time.GetUtcNow();
        ScopeRecord? record = await work.Firing.Fire(
            permit, work.Scope(state.Planned, state.Ranges), cancel);
        if (record is null || record.Traces.Count == 0)
        {
            return false;
        }

        string name = state.Planned.Point.Name;
        double plate = await work.Plate.Read(cancel);
        long id = work.Evidence.AddCapture(new CaptureRow(
            name, number, at, record.Traces, voltmeter, plate, state.Set)
        {
            CountBefore = state.Count,
            CountAfter = record.Count,
        });
        AnalysisResult result = CaptureAnalysis.Of(record.Traces, work.Settings);
        CaptureContext context = state.Context(work, record, result, voltmeter, plate: null);
        Verdict verdict = ProvingJudge.Judge(context);
        work.Evidence.AddVerdict(id, verdict, result.Train.OffCurrent, result.Train.BusBeforeOn1);
        CaptureWords.Say(work.Events, $"{name} train {number}", verdict, result.Train.OffCurrent);
        if (verdict.Stop is not null)
        {
            throw new StopException(StopOutcome.Of(context, verdict));
        }

        if (MeasuredEnvelope.Exceeded(record.Traces, work.Plan.Bench, work.Plan.Sequence.Ratings) is { } exceeded)
        {
            throw new SafetyException($"{name}: {exceeded}; no further train is fired");
        }

        state.Follow(record, verdict);
        if (verdict.IsValid)
        {
            work.ShownLonger = ProvingJudge.ShownLonger(context);
        }

        return verdict.IsValid;
    }
}
