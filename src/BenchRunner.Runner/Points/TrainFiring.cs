using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Safety;
using BenchRunner.Safety.Supervision;

namespace BenchRunner.Runner.Points;

/// <summary>Fires one pulse train and gets the scope's record of it, or says why there is none.</summary>
/// <remarks>A train is never fired twice by itself: a record that is missing or broken costs one capture.</remarks>
public sealed class TrainFiring(OpenBench bench, SafetySupervisor supervisor, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan RecordWithin = TimeSpan.FromSeconds(2);

    /// <summary>A train from setting the scope to the whole record, on the slowest link, with a repetition.</summary>
    private static readonly TimeSpan TrainWithin = TimeSpan.FromMinutes(2);

    /// <summary>Trains in a row that no scope saw, from which it is no trigger that was missed.</summary>
    private const int MostUnseenInARow = 3;

    private int _unseenInARow;

    /// <summary>When the last train was triggered, a time stamp of the clock; null before the first.</summary>
    public long? FiredAt { get; private set; }

    /// <summary>Sets the scope; costs nothing where the settings stand, and after a link that was opened again all are
    /// sent.</summary>
    /// <exception cref="InstrumentException">The scope cannot be set or reached.</exception>
    public Task Prepare(ScopeSettings settings, CancellationToken cancel) =>
        OnScope(() => bench.Scope.Configure(settings, cancel));

    /// <summary>Asks the scope's settings back.</summary>
    /// <exception cref="SettingChangedException">One is another than was set.</exception>
    /// <exception cref="InstrumentException">The scope cannot be reached.</exception>
    public Task CheckScope(CancellationToken cancel) => OnScope(() => bench.Scope.CheckSettings(cancel));

    /// <summary>The scope's acquisition count before the first train of a point, so that an old record is known as
    /// one.</summary>
    /// <exception cref="InstrumentException">The scope cannot be reached.</exception>
    public async Task<long> Count(CancellationToken cancel)
    {
        long count = 0;
        await OnScope(async () => count = await bench.Scope.ReadCount(cancel));
        return count;
    }

    /// <summary>Takes a record at once, with no train: both gates stay off.</summary>
    /// <returns>The record; null where it was missed or lost on its way.</returns>
    /// <exception cref="InstrumentException">The scope cannot be set or reached.</exception>
    public async Task<ScopeRecord?> RecordNow(ScopeSettings settings, CancellationToken cancel)
    {
        await Prepare(settings, cancel);
        await OnScope(() => bench.Scope.Arm(cancel));
        await OnScope(() => bench.Scope.Trigger(cancel));
        return (await Record(cancel)).Record;
    }

    /// <summary>Arms scope and pulser, fires, waits for the record and reads it.</summary>
    /// <returns>The record; null where the trigger was missed or the record was lost on its way.</returns>
    /// <exception cref="PermitException">The permit is not live: nothing was fired.</exception>
    /// <exception cref="InstrumentException">An instrument did not do what it was told, or the scope cannot be
    /// reached.</exception>
    /// <exception cref="LinkException">The pulser's link failed: whether a train was fired is unknown.</exception>
    /// <exception cref="SafetyException">Train after train is fired with the bus up, and none reaches the gates: they may
    /// not be held off.</exception>
    public async Task<ScopeRecord?> Fire(Permit permit, ScopeSettings settings, CancellationToken cancel)
    {
        supervisor.Progress("firing and reading a train", TrainWithin);
        await Prepare(settings, cancel);
        await OnScope(() => bench.Scope.Arm(cancel));
        await bench.Pulser.Arm(permit, cancel);
        supervisor.Witness.Firing();

        // The trigger is what a pause counts from, not the pulser's word that it has fired.
        FiredAt = time.GetTimestamp();
        try
        {
            await bench.Pulser.Fire(permit, cancel);
        }
        finally
        {
            supervisor.Witness.Fired();
        }

        (ScopeRecord? record, AcquisitionEnd? end) = await Record(cancel);
        _unseenInARow = end == AcquisitionEnd.NotTriggered ? _unseenInARow + 1 : 0;
        return _unseenInARow < MostUnseenInARow || !supervisor.Witness.MayBeEnergised
            ? record
            : throw new SafetyException(
                $"{MostUnseenInARow} trains in a row were fired and none reached the scope's trigger: the gate drivers may "
                    + "have lost their supply and hold nothing off; look at the drivers' supply, then at trigger and "
                    + "probe");
    }

    private async Task<(ScopeRecord? Record, AcquisitionEnd? End)> Record(CancellationToken cancel)
    {
        try
        {
            AcquisitionEnd end = await bench.Scope.WaitForRecord(RecordWithin, cancel);
            if (end == AcquisitionEnd.Complete)
            {
                ScopeRecord record = await bench.Scope.Read(cancel);
                if (record.Traces.Count == 0)
                {
                    events.Say(
                        Severity.Warning, "record-lost", "no trace of the scope's record can be used; the train is lost");
                }

                return (record, end);
            }

            string what = end == AcquisitionEnd.NotTriggered ? "trigger" : "come to the end of its acquisition";
            events.Say(
                Severity.Warning, end == AcquisitionEnd.NotTriggered ? "trigger-missed" : "acquisition-unfinished",
                $"the scope did not {what} within {RecordWithin.TotalSeconds:0} s; the acquisition was aborted, the "
                    + $"train is lost");
            return (null, end);
        }
        catch (LinkException lost)
        {
            events.Say(
                Severity.Warning, "record-lost", $"the scope's record was lost on its way ({lost.Message}); no part of "
                    + $"it is kept");
        }

        return (null, null);
    }

    /// <summary>A scope that cannot be reached ends the run, but energises nothing: it is no reason to trip.</summary>
    private static async Task OnScope(Func<Task> work)
    {
        try
        {
            await work();
        }
        catch (LinkException lost)
        {
            throw new InstrumentException("scope", lost.Message);
        }
    }
}
