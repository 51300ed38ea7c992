using System.Runtime.CompilerServices;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Replies cut out of the bytes of a link: by what is due on a stream, by their marked ends where the link
/// keeps messages. Knows what is due, not what was asked. One owner at a time.</summary>
internal sealed class ReplyStream(ILink link, WireHabits habits)
{
    private readonly byte _end = habits.Terminator == Terminator.CarriageReturn ? (byte)'\r' : (byte)'\n';
    private readonly BlockForm _form = new(
        !habits.BlockHasEnd ? BlockEnd.Nothing
            : habits.Terminator == Terminator.CarriageReturn ? BlockEnd.CarriageReturn
            : BlockEnd.NewLine,
        habits.BlockBefore);

    // What may stand between two replies and is none.
    private readonly byte[] _slack =
        habits is { BlockHasEnd: true, Terminator: not Terminator.CarriageReturn } ? [(byte)'\r'] : "\r\n"u8.ToArray();

    private readonly byte[] _buffer = new byte[ReplyLine.Limit + 4096];
    private int _start;
    private int _filled;

    /// <summary>The blocks of the last reply that was one. Only the reader gives their buffers back: a receive that is
    /// under way while the link is closed still writes to them.</summary>
    public BlockReader Blocks { get; } = new();

    /// <summary>Whether more than the carriage return is held that some instruments send after their newline.</summary>
    public bool HoldsReply => Blocks.Excess > 0 || Held.ContainsAnyExcept(_slack);

    private Span<byte> Held => _buffer.AsSpan(_start, _filled - _start);

    /// <summary>Reads one line.</summary>
    /// <returns>It, without its end; gone with the next read.</returns>
    /// <exception cref="ReplyException">Too long.</exception>
    /// <exception cref="LinkException">The stream ended or the link failed first.</exception>
    public ValueTask<ReadOnlyMemory<byte>> ReadLine(CancellationToken token) =>
        link.KeepsMessages ? ReadMessage(token) : ReadToNewline(token);

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<ReadOnlyMemory<byte>> ReadMessage(CancellationToken token)
    {
        (_start, _filled) = (0, 0);
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
        while (!ReplyLine.TryRead(Begun(), false, out reply, out consumed, _end))
        {
            if (_start > 0)
            {
                Held.CopyTo(_buffer);
                (_start, _filled) = (0, _filled - _start);
            }

            _filled += await Receive(_buffer.AsMemory(_filled), token);
        }

        var line = _buffer.AsMemory(_start, _filled - _start)[reply];
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
        Blocks.Begin(bound, marked: link.KeepsMessages, form: _form);
        Begun();
        while (!Blocks.IsWhole)
        {
            var headDue = Blocks.Announced is null;
            Blocks.Advance(Held.IsEmpty ? await Receive(Blocks.Space, token) : TakeHeld(Blocks.Space.Span));
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
        var excess = link.KeepsMessages ? Blocks.Excess : 0;
        while (link.KeepsMessages && !link.AtEnd)
        {
            excess += await Receive(_buffer, token);
        }

        if (excess > 0)
        {
            throw new ReplyException(ReplyFault.TrailingData, FormattableString.Invariant($"{excess} bytes"));
        }
    }

    /// <summary>Drops what is held.</summary>
    /// <returns>Bytes dropped.</returns>
    public int Drop()
    {
        var dropped = _filled - _start + Blocks.Excess;
        Blocks.Dispose();
        _start = _filled = 0;
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
            _filled = await Receive(_buffer, cancel);
        }

        return HoldsReply;
    }

    /// <summary>What is held, from the first byte on that may be a reply's.</summary>
    private Span<byte> Begun()
    {
        while (_start < _filled && _slack.AsSpan().Contains(_buffer[_start]))
        {
            _start++;
        }

        return Held;
    }

    /// <summary>Moves what is held into the space of a block: an echo came with it.</summary>
    private int TakeHeld(Span<byte> space)
    {
        var count = Math.Min(space.Length, Held.Length);
        Held[..count].CopyTo(space);
        _start += count;
        return count;
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<int> Receive(Memory<byte> space, CancellationToken token)
    {
        var count = await link.Read(space, token);
        return count > 0 || link.AtEnd ? count : throw new LinkException(link.Name, "the instrument closed the connection");
    }
}
