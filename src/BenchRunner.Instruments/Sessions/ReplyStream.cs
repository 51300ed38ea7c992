using System.Runtime.CompilerServices;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Replies cut out of the bytes of a link: by what is due on a stream, by their marked ends where the link
/// keeps messages. Knows what is due, not what was asked. One owner at a time.</summary>
internal sealed class ReplyStream(ILink link)
{
    private readonly byte[] _buffer = new byte[ReplyLine.Limit + 4096];
    private int _start;
    private int _end;

    /// <summary>The blocks of the last reply that was one. Only the reader gives their buffers back: a receive that is
    /// under way while the link is closed still writes to them.</summary>
    public BlockReader Blocks { get; } = new();

    /// <summary>Whether more than the carriage return is held that some instruments send after their newline.</summary>
    public bool HoldsReply => Blocks.Excess > 0 || _buffer.AsSpan(_start, _end - _start).ContainsAnyExcept((byte)'\r');

    /// <summary>Reads one line.</summary>
    /// <returns>It, without its end; gone with the next read.</returns>
    /// <exception cref="ReplyException">Too long.</exception>
    /// <exception cref="LinkException">The stream ended or the link failed first.</exception>
    public ValueTask<ReadOnlyMemory<byte>> ReadLine(CancellationToken token) =>
        link.KeepsMessages ? ReadMessage(token) : ReadToNewline(token);

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<ReadOnlyMemory<byte>> ReadMessage(CancellationToken token)
    {
        (_start, _end) = (0, 0);
        var filled = 0;
        do
        {
            if (filled > ReplyLine.Limit)
            {
                throw new ReplyException(ReplyFault.TooLong, _buffer.AsSpan(0, filled));
            }

            filled += await Receive(_buffer.AsMemory(filled), token);
        }
        while (!link.AtEnd);
        return ReplyLine.Trim(_buffer.AsMemory(0, filled));
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<ReadOnlyMemory<byte>> ReadToNewline(CancellationToken token)
    {
        Range reply;
        int consumed;
        while (!ReplyLine.TryRead(_buffer.AsSpan(_start, _end - _start), false, out reply, out consumed))
        {
            if (_start > 0)
            {
                _buffer.AsSpan(_start, _end - _start).CopyTo(_buffer);
                (_start, _end) = (0, _end - _start);
            }

            _end += await Receive(_buffer.AsMemory(_end), token);
        }

        var line = _buffer.AsMemory(_start, _end - _start)[reply];
        _start += consumed;
        return line;
    }

    /// <summary>Reads one block into <see cref="Blocks"/>.</summary>
    /// <param name="bound">The longest that is due, bytes.</param>
    /// <param name="announced">Told the block's length as soon as it is known.</param>
    /// <param name="token">Ends the reading.</param>
    /// <exception cref="ReplyException">No block, or another length than announced.</exception>
    /// <exception cref="LinkException">The stream ended or the link failed first.</exception>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder))]
    public async ValueTask ReadBlock(int bound, Action<int> announced, CancellationToken token)
    {
        Blocks.Begin(bound, marked: link.KeepsMessages);
        while (!Blocks.IsWhole)
        {
            var headDue = Blocks.Announced is null;
            Blocks.Advance(await Receive(Blocks.Space, token));
            if (headDue && Blocks.Announced is { } length)
            {
                announced(length);
            }

            if (link.AtEnd)
            {
                Blocks.End();
            }
        }

        // What ends a message may come after the newline that ends the reply; nothing else may.
        while (link.KeepsMessages && !link.AtEnd)
        {
            if (await Receive(_buffer, token) is > 0 and var count)
            {
                throw new ReplyException(ReplyFault.TrailingData, _buffer.AsSpan(0, count));
            }
        }
    }

    /// <summary>Drops what is held.</summary>
    /// <returns>Bytes dropped.</returns>
    public int Drop()
    {
        var dropped = _end - _start + Blocks.Excess;
        Blocks.Dispose();
        _start = _end = 0;
        return dropped;
    }

    /// <summary>Drops whatever comes next.</summary>
    /// <returns>Bytes dropped.</returns>
    public ValueTask<int> DropNext(CancellationToken token) => Receive(_buffer, token);

    /// <summary>Takes in what waits in the system, without waiting for more.</summary>
    /// <returns>Whether it is more than carriage returns.</returns>
    public async ValueTask<bool> HasUnasked(CancellationToken cancel)
    {
        // What nothing had asked for bears another identifier, and a link that keeps messages drops it.
        while (!link.KeepsMessages && !HoldsReply && link.HasInput)
        {
            _start = 0;
            _end = await Receive(_buffer, cancel);
        }

        return HoldsReply;
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<int> Receive(Memory<byte> space, CancellationToken token)
    {
        var count = await link.Read(space, token);
        return count > 0 || link.AtEnd ? count : throw new LinkException(link.Name, "the instrument closed the connection");
    }
}
