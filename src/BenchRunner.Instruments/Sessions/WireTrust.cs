using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Whether what comes next on a wire can be trusted to answer what is asked next: a doubt can be lifted, a
/// break cannot.</summary>
/// <param name="link">The link; closed when the wire breaks.</param>
/// <param name="replyWithin">The deadline of a reply, for messages.</param>
/// <param name="report">Told what happens; from any thread.</param>
internal sealed class WireTrust(ILink link, TimeSpan replyWithin, Action<InstrumentEventKind, string> report)
{
    private LinkException? _broken;

    /// <summary>Why the wire is of no use any more; null while it is.</summary>
    public LinkException? Broken => Volatile.Read(ref _broken);

    /// <summary>What makes the next reply doubtful, e.g. the question whose reply is due; null: nothing does.</summary>
    public string? WhyNot { get; private set; }

    /// <summary>Notes before a question goes out that its reply is due.</summary>
    public void Note(string query) => WhyNot = query;

    /// <summary>Notes and reports that what comes next may belong to something asked before.</summary>
    public void Doubt(string why)
    {
        WhyNot = why;
        report(InstrumentEventKind.Doubt, why);
    }

    /// <summary>Takes the doubt back: the reply that was due was read, or the wire was resynchronised.</summary>
    public void Restore() => WhyNot = null;

    /// <summary>Marks the wire as of no use and closes its link; the first reason stays.</summary>
    public LinkException Break(LinkException why)
    {
        if (Interlocked.CompareExchange(ref _broken, why, null) is null)
        {
            report(InstrumentEventKind.Broken, Printable.Text(why.Message));
            link.Dispose();
        }

        return why;
    }

    /// <summary>What to throw for what ended an exchange; the doubt noted for it stays.</summary>
    public Exception Failure(Exception e, string query, CancellationToken cancel)
    {
        switch (e)
        {
            case OperationCanceledException when cancel.IsCancellationRequested:
                report(InstrumentEventKind.Cancelled, $"cancelled while the reply to '{query}' was due");
                return e;
            case OperationCanceledException:
                report(InstrumentEventKind.Doubt, $"no whole reply to '{query}' in time");
                return new LinkException(
                    link.Name, $"no whole reply to '{query}' within {replyWithin.TotalSeconds:0.###} s", e);
            case ReplyException reply:
                report(InstrumentEventKind.Doubt, $"reply to '{query}': {e.Message}");
                var failure = new LinkException(
                    link.Name, $"reply to '{query}' is {e.Message}{Advice(reply.Fault)}", e);
                return reply.Fault == ReplyFault.TooLong ? Break(failure) : failure;
            case LinkException lost:
                Break(lost);
                return Broken!;
            default:
                return e;
        }
    }

    private static string Advice(ReplyFault fault) =>
        fault == ReplyFault.Echo ? "; switch the instrument's echo off" : string.Empty;
}
