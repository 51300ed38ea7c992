using System.Runtime.CompilerServices;
using System.Text;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>One of the two connections of a HiSLIP session: whole messages out; headers in, and their payloads as far
/// as asked for.</summary>
/// <remarks>One reader, one writer at a time. Whatever was cancelled goes on where it stopped.</remarks>
internal sealed class HislipChannel(string name, StreamSocket socket) : IDisposable
{
    private const int LongestText = 256;

    // A header and the whole of a short reply come in one receive; a long payload goes straight to its buffer.
    private readonly byte[] _ahead = new byte[4096];
    private int _start;
    private int _end;

    /// <summary>Payload bytes of the message under way that were not read yet.</summary>
    public ulong Left { get; private set; }

    /// <summary>Whether bytes wait to be read.</summary>
    public bool HasInput
    {
        get
        {
            try
            {
                return _end > _start || socket.HasInput;
            }
            catch (Exception e) when (StreamSocket.IsLoss(e))
            {
                throw StreamSocket.Lost(name, e);
            }
        }
    }

    /// <summary>Sends a message whose header stands in front of its payload.</summary>
    /// <exception cref="LinkException">Lost, or not taken in time.</exception>
    public void Send(ReadOnlySpan<byte> message)
    {
        try
        {
            socket.SendAll(message);
        }
        catch (Exception e) when (StreamSocket.IsLoss(e))
        {
            throw StreamSocket.Lost(name, e);
        }
    }

    /// <summary>Sends a message.</summary>
    /// <param name="header">Its header; the length is the payload's.</param>
    /// <param name="payload">Its payload.</param>
    /// <exception cref="LinkException">Lost, or not taken in time.</exception>
    public void Send(HislipHeader header, ReadOnlySpan<byte> payload)
    {
        var message = new byte[HislipHeader.Size + payload.Length];
        (header with { Length = (ulong)payload.Length }).Write(message);
        payload.CopyTo(message.AsSpan(HislipHeader.Size));
        Send(message);
    }

    /// <summary>The header of the next message; what is left of the one under way is dropped.</summary>
    /// <exception cref="LinkException">Lost, ended, or out of step.</exception>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<HislipHeader> Next(CancellationToken cancel)
    {
        while (Left > 0)
        {
            await FillOrDrop(cancel);
        }

        while (true)
        {
            if (TryTake() is { } header)
            {
                return header;
            }

            _ahead.AsSpan(_start, _end - _start).CopyTo(_ahead);
            (_start, _end) = (0, _end - _start);
            _end += await Receive(_ahead.AsMemory(_end), cancel);
        }
    }

    /// <summary>Reads payload of the message under way, straight into the buffer.</summary>
    /// <returns>Bytes read, at least 1 where some are left and there is room for them.</returns>
    /// <exception cref="LinkException">Lost, or ended.</exception>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel)
    {
        var room = buffer[..(int)Math.Min((ulong)buffer.Length, Left)];
        if (room.IsEmpty)
        {
            return 0;
        }

        var count = Math.Min(room.Length, _end - _start);
        if (count > 0)
        {
            _ahead.AsSpan(_start, count).CopyTo(room.Span);
            _start += count;
        }
        else
        {
            count = await Receive(room, cancel);
        }

        Left -= (ulong)count;
        return count;
    }

    /// <summary>The payload of the message under way.</summary>
    /// <param name="length">Bytes that its type has.</param>
    /// <param name="cancel">Ends the reading.</param>
    /// <exception cref="LinkException">Of another length, lost, or ended.</exception>
    public async ValueTask<byte[]> Payload(int length, CancellationToken cancel)
    {
        if (Left != (ulong)length)
        {
            throw Refused(new HislipException(
                HislipFault.BadPayload, FormattableString.Invariant($"{Left} bytes where {length} are due")));
        }

        var payload = new byte[length];
        for (var filled = 0; filled < length;)
        {
            filled += await Read(payload.AsMemory(filled), cancel);
        }

        return payload;
    }

    /// <summary>What an error message of the server says, escaped.</summary>
    public async ValueTask<string> Text(HislipHeader header, CancellationToken cancel)
    {
        var text = new byte[(int)Math.Min(Left, LongestText)];
        for (var filled = 0; filled < text.Length;)
        {
            filled += await Read(text.AsMemory(filled), cancel);
        }

        return FormattableString.Invariant(
            $"{header.Type} {header.Control}: {Printable.Text(Encoding.UTF8.GetString(text), LongestText)}");
    }

    /// <summary>What to throw for a message that ends the connection.</summary>
    public LinkException Refused(HislipException e) => new(name, e.Message, e);

    public void Dispose() => socket.Dispose();

    private HislipHeader? TryTake()
    {
        try
        {
            if (!HislipHeader.TryRead(_ahead.AsSpan(_start, _end - _start), out var header))
            {
                return null;
            }

            _start += HislipHeader.Size;
            Left = header.Length;
            return header;
        }
        catch (HislipException e)
        {
            throw Refused(e);
        }
    }

    private async ValueTask FillOrDrop(CancellationToken cancel)
    {
        if (_start == _end)
        {
            (_start, _end) = (0, await Receive(_ahead, cancel));
        }

        var count = (int)Math.Min((ulong)(_end - _start), Left);
        _start += count;
        Left -= (ulong)count;
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<int> Receive(Memory<byte> space, CancellationToken cancel)
    {
        int count;
        try
        {
            count = await socket.Receive(space, cancel);
        }
        catch (Exception e) when (StreamSocket.IsLoss(e))
        {
            throw StreamSocket.Lost(name, e);
        }

        // Between two messages an end is an end; inside one it is worse.
        return count > 0 ? count
            : Left > 0 || _end > _start ? throw Refused(new HislipException(
                HislipFault.Truncated, "the instrument closed the connection inside it"))
            : throw new LinkException(name, "the instrument closed the connection");
    }
}
