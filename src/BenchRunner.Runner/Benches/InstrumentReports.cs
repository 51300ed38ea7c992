using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Runner.Benches;

/// <summary>Makes events of what the links report.</summary>
public sealed class InstrumentReports(EventSource events) : IInstrumentLog
{
    /// <summary>Raised after a link to the supply or the interlock came into doubt or was lost, by no doing of ours; with
    /// the reason. A handler must not throw.</summary>
    public event Action<string>? SafetyDoubted;

    /// <inheritdoc/>
    public void Report(InstrumentEvent what)
    {
        ArgumentNullException.ThrowIfNull(what);
        (Severity severity, string kind) = what.Kind switch
        {
            InstrumentEventKind.Connected => (Severity.Detail, "link-connected"),
            InstrumentEventKind.Errors => (Severity.Warning, "instrument-errors"),
            InstrumentEventKind.Discarded => (Severity.Warning, "discarded"),
            InstrumentEventKind.Doubt or InstrumentEventKind.Cancelled => (Severity.Warning, "link-doubt"),
            InstrumentEventKind.Resynchronised => (Severity.Warning, "link-resynchronised"),
            InstrumentEventKind.Reconnected => (Severity.Warning, "link-reconnected"),
            _ => (Severity.Error, "link-broken"),
        };
        events.As(what.Role).Say(severity, kind, $"{what.Message} ({what.Link})");
        if (what is
            {
                Role: "supply" or "interlock", Kind: InstrumentEventKind.Doubt or InstrumentEventKind.Broken
            })
        {
            SafetyDoubted?.Invoke(
                (what.Role == "interlock" ? "the watch lost sight of the bench: " : "the supply's word is in doubt: ")
                    + $"{what.Link}: {what.Message}");
        }
    }
}
