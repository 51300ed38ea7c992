using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Guards;

/// <summary>Passes on what is wrong with a link: that one was opened is no deed of the guardian's.</summary>
internal sealed class LinkTrouble(IInstrumentLog log) : IInstrumentLog
{
    /// <inheritdoc/>
    public void Report(InstrumentEvent what)
    {
        if (what.Kind != InstrumentEventKind.Connected)
        {
            log.Report(what);
        }
    }
}
