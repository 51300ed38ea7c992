namespace BenchRunner.Instruments.Sessions;

/// <summary>Where instruments report what a person should be able to read later. Called from any thread; must not
/// throw.</summary>
public interface IInstrumentLog
{
    /// <summary>Takes note of one event.</summary>
    void Report(InstrumentEvent what);
}
