namespace BenchRunner.Instruments.Links;

/// <summary>Bytes to and from one instrument: a stream without message edges, or, where the link keeps them, messages
/// whose ends are marked.</summary>
/// <remarks>One reader at a time; writes may come from any thread and never mix.</remarks>
public interface ILink : IDisposable
{
    /// <summary>The link as the bench file names it.</summary>
    string Name { get; }

    /// <summary>Whether the link keeps messages apart: it marks their ends, pairs a reply with its question by itself
    /// and can be cleared. A stream does none of that.</summary>
    bool KeepsMessages => false;

    /// <summary>Whether what was read last ended a message; never on a stream.</summary>
    bool AtEnd => false;

    /// <summary>Told in one line what the link dropped or did not understand and went on without; from any
    /// thread.</summary>
    event Action<string>? Discarded
    {
        add { }
        remove { }
    }

    /// <summary>Whether bytes wait to be read.</summary>
    /// <exception cref="LinkException">The link is lost.</exception>
    bool HasInput { get; }

    /// <summary>Hands the bytes to the system in one piece before it returns, within the link's bound; does not wait
    /// for the instrument.</summary>
    /// <remarks>Synchronous, so that a permit can hold its lock round it.</remarks>
    /// <exception cref="LinkException">The link is lost or did not take the bytes in time: how many went out is
    /// unknown.</exception>
    void Write(ReadOnlySpan<byte> message);

    /// <summary>Reads what comes next, at least one byte.</summary>
    /// <returns>Bytes read; 0 where the other side has ended the stream, or where <see cref="AtEnd"/> says that a
    /// message ended with nothing in it.</returns>
    /// <exception cref="LinkException">The link is lost.</exception>
    /// <exception cref="Replies.ReplyException">The instrument broke off the reply that was due; the link
    /// stands.</exception>
    /// <exception cref="OperationCanceledException">Cancelled; nothing was taken.</exception>
    ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel);

    /// <summary>Clears the device (IEEE 488.1): both sides drop what is under way, and what comes next answers what is
    /// asked next. A command that was sent and not yet obeyed may be dropped too.</summary>
    /// <param name="cancel">Ends it; then the link is of no more use.</param>
    /// <exception cref="LinkException">The link failed.</exception>
    /// <exception cref="NotSupportedException">A stream cannot be cleared: a caller's mistake.</exception>
    ValueTask Clear(CancellationToken cancel) => throw new NotSupportedException();

    /// <summary>Reads the status byte (IEEE 488.2, 11.2) beside whatever exchange is under way.</summary>
    /// <param name="cancel">Ends it; then the link is of no more use.</param>
    /// <exception cref="LinkException">The link failed.</exception>
    /// <exception cref="NotSupportedException">A stream has none: a caller's mistake.</exception>
    ValueTask<byte> ReadStatus(CancellationToken cancel) => throw new NotSupportedException();
}
