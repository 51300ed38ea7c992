namespace BenchRunner.Acceptance.Events;

/// <summary>One source's voice: stamps what it says with the time and hands it to the sink.</summary>
/// <param name="name">The source, e.g. <c>watch</c>.</param>
/// <param name="sink">Where it goes.</param>
/// <param name="time">The clock.</param>
public sealed class EventSource(string name, IEventSink sink, TimeProvider time)
{
    /// <summary>Says that something happened.</summary>
    public void Say(Severity severity, string kind, string message) =>
        sink.Receive(new BenchEvent(time.GetUtcNow(), name, severity, kind, message));

    /// <summary>Another source that speaks to the same sink by the same clock.</summary>
    public EventSource As(string other) => new(other, sink, time);
}
