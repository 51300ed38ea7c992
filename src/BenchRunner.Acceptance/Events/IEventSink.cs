namespace BenchRunner.Acceptance.Events;

/// <summary>Where events go: the console, a file, a live page. A sink never throws and never waits.</summary>
public interface IEventSink
{
    /// <summary>Takes an event.</summary>
    void Receive(BenchEvent happened);
}
