using System.Collections.Concurrent;
using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Safety.Tests.Benches;

/// <summary>Keeps what is said, and what the links report.</summary>
internal sealed class Recorder : IEventSink, IInstrumentLog
{
    private readonly ConcurrentQueue<BenchEvent> _events = new();

    public void Receive(BenchEvent happened) => _events.Enqueue(happened);

    public void Report(InstrumentEvent what)
    {
        // What the links report is another suite's matter.
    }

    public int Count(string kind) => _events.Count(happened => happened.Kind == kind);
}
