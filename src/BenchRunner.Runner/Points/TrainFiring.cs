using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;

namespace BenchRunner.Runner.Points;

/// <summary>Fires one pulse train and gets the scope's record of it, or says why there is none.</summary>
/// <remarks>A train is never fired twice by itself: a record that is missing or broken costs one capture.</remarks>
public sealed class TrainFiring(OpenBench bench, EventSource events)
{
    private static readonly TimeSpan RecordWithin = TimeSpan.FromSeconds(2);

    /// <summary>Arms scope and pulser, fires, waits for the record and reads it.</summary>
    /// <returns>The record; null where the trigger was missed or the record was lost on its way.</returns>
    /// <exception cref="PermitException">The permit is not live: nothing was fired.</exception>
    /// <exception cref="InstrumentException">The pulser did not do what it was told.</exception>
    /// <exception cref="LinkException">A link failed before or while firing: the state is unknown.</exception>
    public async Task<ScopeRecord?> Fire(Permit permit, ScopeSettings settings, CancellationToken cancel)
    {
        // Costs nothing where the settings stand; after a link that had to be opened again they are all sent again.
        await bench.Scope.Configure(settings, cancel);
        await bench.Scope.Arm(cancel);
        await bench.Pulser.Arm(permit, cancel);
        await bench.Pulser.Fire(permit, cancel);
        if (!await bench.Scope.WaitForRecord(RecordWithin, cancel))
        {
            events.Say(
                Severity.Warning, "trigger-missed",
                $"the scope did not trigger within {RecordWithin.TotalSeconds:0} s; the acquisition was aborted, the train is lost");
            return null;
        }

        try
        {
            return await bench.Scope.Read(cancel);
        }
        catch (LinkException lost)
        {
            events.Say(Severity.Warning, "record-lost", $"the scope's record was lost on its way ({lost.Message}); no part of it is kept");
            return null;
        }
    }
}
