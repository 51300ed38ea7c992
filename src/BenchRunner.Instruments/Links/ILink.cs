namespace BenchRunner.Instruments.Links;

/// <summary>A stream of bytes to and from one instrument; knows nothing of messages.</summary>
/// <remarks>One reader at a time; writes may come from any thread and never mix.</remarks>
public interface ILink : IDisposable
{
    /// <summary>The link as the bench file names it.</summary>
    string Name { get; }

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
    /// <returns>Bytes read; 0 where the other side has ended the stream.</returns>
    /// <exception cref="LinkException">The link is lost.</exception>
    /// <exception cref="OperationCanceledException">Cancelled; nothing was taken.</exception>
    ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel);
}
