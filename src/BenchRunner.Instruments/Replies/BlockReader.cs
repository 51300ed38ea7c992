using System.Buffers;

namespace BenchRunner.Instruments.Replies;

/// <summary>
/// Collects a reply that is a block, as its bytes come, in a pooled buffer: it says where the next bytes go, so that a
/// receiver writes them straight there. Does no I/O.
/// </summary>
/// <remarks>
/// A line reader would cut a block at its first newline; what is due here is counted. The end is NL or CR NL; anything
/// else between is a fault, never dropped quietly. One owner; not thread-safe.
/// </remarks>
public sealed class BlockReader : IDisposable
{
    // Room for the end (CR NL), which is received with the data in one call.
    private const int Ending = 2;

    private readonly byte[] _head = new byte[4096];
    private byte[]? _rental;
    private int _filled;
    private int _length = -1;
    private int _bound;

    /// <summary>The block's bytes, once whole; valid until the next <see cref="Begin"/> or disposal.</summary>
    public ReadOnlySpan<byte> Data => _rental.AsSpan(0, Math.Max(_length, 0));

    /// <summary>Whether the block and its end have come.</summary>
    public bool IsWhole { get; private set; }

    /// <summary>Bytes that came after the end of the reply.</summary>
    public int Excess { get; private set; }

    /// <summary>Bytes that the head announced; −1 before the head has come.</summary>
    public int Length => _length;

    /// <summary>What came before the head was whole.</summary>
    internal ReadOnlySpan<byte> Head => _length < 0 ? _head.AsSpan(0, _filled) : [];

    /// <summary>Where the next bytes go.</summary>
    public Memory<byte> Space => _length < 0 ? _head.AsMemory(_filled) : _rental.AsMemory(_filled, _length + Ending - _filled);

    /// <summary>Gets ready for one reply.</summary>
    /// <param name="bound">The longest block that is due, bytes; at most <see cref="BlockHeader.Limit"/>.</param>
    public void Begin(int bound)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(bound);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(bound, BlockHeader.Limit);
        Dispose();
        _bound = bound;
    }

    /// <summary>Takes note of bytes that were put into <see cref="Space"/>.</summary>
    /// <param name="count">How many.</param>
    /// <exception cref="ReplyException">They are no block, or not of the length that is due.</exception>
    public void Advance(int count)
    {
        _filled += count;
        if (_length < 0 && !TryTakeHead())
        {
            return;
        }

        if (_filled > _length)
        {
            TakeEnd(_rental.AsSpan(_length, _filled - _length));
        }
    }

    /// <summary>What is missing, for a stream that ended or a deadline that passed before the reply was whole.</summary>
    public ReplyException Missing()
    {
        var seen = (_length < 0 ? _head : _rental).AsSpan(0, Math.Min(_filled, 80));
        var fault = _length < 0 && _filled == 0 ? ReplyFault.Empty
            : _length < 0 || _filled < _length ? ReplyFault.TruncatedBlock
            : ReplyFault.Unterminated;
        return new ReplyException(fault, seen);
    }

    /// <summary>Gives the buffer back to the pool.</summary>
    public void Dispose()
    {
        if (_rental is not null)
        {
            ArrayPool<byte>.Shared.Return(_rental);
            _rental = null;
        }

        _filled = 0;
        _length = -1;
        IsWhole = false;
        Excess = 0;
    }

    private bool TryTakeHead()
    {
        if (!BlockHeader.TryRead(_head.AsSpan(0, _filled), _bound, out var header))
        {
            return false;
        }

        var rental = ArrayPool<byte>.Shared.Rent(header.Length + Ending);
        var came = _head.AsSpan(header.Start, _filled - header.Start);
        var taken = Math.Min(came.Length, header.Length + Ending);
        came[..taken].CopyTo(rental);
        _rental = rental;
        _length = header.Length;
        _filled = taken;
        Excess = came.Length - taken;
        return true;
    }

    private void TakeEnd(ReadOnlySpan<byte> tail)
    {
        var newline = tail[0] == '\r' ? 1 : 0;
        if (newline == tail.Length)
        {
            return;
        }

        if (tail[newline] != '\n')
        {
            var fault = tail[0] switch
            {
                (byte)';' => ReplyFault.TooManyUnits,
                (byte)',' => ReplyFault.TooManyElements,
                _ => ReplyFault.TrailingData,
            };
            throw new ReplyException(fault, tail);
        }

        Excess += tail.Length - newline - 1;
        IsWhole = true;
    }
}
