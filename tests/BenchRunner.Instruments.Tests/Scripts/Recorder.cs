using System.Collections.Concurrent;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>Keeps what the instruments report.</summary>
internal sealed class Recorder : IInstrumentLog
{
    private readonly ConcurrentQueue<InstrumentEvent> _events = new();

    public InstrumentEvent[] Events => [.. _events];

    /// <summary>Called where the event is reported, on the same thread.</summary>
    public Action<InstrumentEvent>? Witness { get; set; }

    public void Report(InstrumentEvent what)
    {
        _events.Enqueue(what);
        Witness?.Invoke(what);
    }

    public bool Has(InstrumentEventKind kind) => Events.Any(e => e.Kind == kind);
}
