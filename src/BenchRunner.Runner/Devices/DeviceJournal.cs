using BenchRunner.Acceptance.Events;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Runner.Devices;

/// <summary>Where every event goes: into the evidence of the run that is open, and to the sinks.</summary>
/// <remarks>
/// A store that has failed takes no more events; they still reach the sinks, and the failure itself ends the run at the
/// next capture. So an event never throws into whoever reports it, the watch above all.
/// </remarks>
public sealed class DeviceJournal(IEventSink sinks) : IEventSink
{
    private volatile RunWriter? _run;

    /// <summary>From now on events belong to this run; null: to none.</summary>
    public void Follow(RunWriter? run) => _run = run;

    /// <inheritdoc/>
    public void Receive(BenchEvent happened)
    {
        try
        {
            _run?.AddEvent(happened);
        }
        catch (Exception failure) when (failure is Evidence.EvidenceException or InvalidOperationException)
        {
            sinks.Receive(happened with
            {
                Source = "evidence",
                Severity = Severity.Error,
                Kind = "event-not-stored",
                Message = failure.Message,
            });
        }

        sinks.Receive(happened);
    }
}
