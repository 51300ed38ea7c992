using System.Text;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Brings questions and replies together again: a drain, then a number asked for that nothing else answers,
/// twice.</summary>
/// <remarks>A late reply may happen to be the number; the second round, with another one, tells. The number is the
/// event
/// status enable register (IEEE 488.2, 10.10), which is of no other use here; each is used once a connection.</remarks>
internal sealed class Resynchronisation(
    ILink link, ReplyStream replies, Deadline deadline, SessionOptions options, TimeProvider time)
{
    private const int MostDropped = 64;
    private const int FirstSentinel = 101;
    private const int LastSentinel = 255;

    private int _sentinel = FirstSentinel;

    /// <summary>Drops whatever is late.</summary>
    /// <param name="put">Sends one message.</param>
    /// <param name="asks">Whether the number is asked for; else the silence must do.</param>
    /// <param name="cancel">Ends it; then it must be done again.</param>
    /// <returns>Bytes dropped.</returns>
    /// <exception cref="LinkException">The link failed, does not fall silent, or sends what nothing asked
    /// for.</exception>
    /// <exception cref="ReplyException">A line without end.</exception>
    /// <exception cref="OperationCanceledException">Cancelled, or no answer in time.</exception>
    public async ValueTask<int> Run(Action<string> put, bool asks, CancellationToken cancel) =>
        await Drain(cancel) + (asks ? await Sentinel(put, cancel) + await Sentinel(put, cancel) : 0);

    private async ValueTask<int> Drain(CancellationToken cancel)
    {
        var began = time.GetTimestamp();
        var dropped = replies.Drop();
        while (time.GetElapsedTime(began) <= options.ReplyWithin + options.Silence)
        {
            var token = deadline.Start(options.Silence, cancel);
            try
            {
                dropped += await replies.DropNext(token);
            }
            catch (OperationCanceledException) when (!cancel.IsCancellationRequested)
            {
                return dropped;
            }
            finally
            {
                deadline.End();
            }
        }

        throw new LinkException(link.Name, "does not fall silent");
    }

    private async ValueTask<int> Sentinel(Action<string> put, CancellationToken cancel)
    {
        if (_sentinel > LastSentinel)
        {
            throw new LinkException(link.Name, "resynchronised too often; look for a bad cable or instrument");
        }

        var number = _sentinel++;
        var dropped = 0;
        var token = deadline.Start(options.ReplyWithin, cancel);
        try
        {
            var question = FormattableString.Invariant($"*ESE {number};*ESE?");
            put(question);
            for (var n = 0; n < MostDropped; n++)
            {
                var reply = await replies.ReadLine(token);
                if (Is(ReplyText.Trim(reply.Span), number))
                {
                    return dropped;
                }

                // An echo of ours is no reply that came late.
                dropped += Ascii.Equals(reply.Span, question) ? 0 : reply.Length + 1;
            }
        }
        finally
        {
            deadline.End();
        }

        throw new LinkException(link.Name, $"more than {MostDropped} replies that nothing had asked for");
    }

    private static bool Is(ReadOnlySpan<byte> reply, int number) =>
        ReplyNumber.IsNumeric(reply) && ReplyNumber.Parse(reply) == number;
}
