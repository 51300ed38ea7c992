using System.Buffers;

namespace BenchRunner.Instruments.Replies;

/// <summary>
/// Collects a reply of blocks, as its bytes come, in pooled buffers: it says where the next bytes go, so that a
/// receiver
/// writes them straight there. Does no I/O.
/// </summary>
/// <remarks>
/// A line reader would cut a block at its first newline; what is due here is counted. The end is NL or CR NL; anything
/// else between is a fault, never dropped quietly. One owner; not thread-safe.
/// </remarks>
public sealed class BlockReader : IDisposable
{
    // Room for the end (CR NL), which is received with the data in one call.
    private const int Ending = 2;

    private readonly byte[] _head = new byte[64];
    private readonly List<(byte[] Rental, int Length)> _blocks = [];
    private int _headFilled;
    private int _filled;
    private int _length = -1;
    private int _bound;
    private int _due;
    private bool _marked;
    private bool _indefinite;
    private BlockForm _form = BlockForm.Standard;

    /// <summary>Whether all blocks and their end have come.</summary>
    public bool IsWhole { get; private set; }

    /// <summary>Bytes that came after the end of the reply.</summary>
    public int Excess => IsWhole ? _headFilled : 0;

    /// <summary>Bytes that the head of the block under way announced; null before it has come.</summary>
    public int? Announced => _length < 0 ? null : _length;

    /// <summary>What came before the first head was whole.</summary>
    internal ReadOnlySpan<byte> Head => _blocks.Count == 0 ? _head.AsSpan(0, _headFilled) : [];

    /// <summary>Where the next bytes go.</summary>
    public Memory<byte> Space => _length < 0
        ? _head.AsMemory(_headFilled)
        : _blocks[^1].Rental.AsMemory(_filled, _length + Ending - _filled);

    /// <summary>Gets ready for one reply.</summary>
    /// <param name="bound">The longest block that is due, bytes; at most <see cref="BlockHeader.Limit"/>.</param>
    /// <param name="count">How many blocks are due.</param>
    /// <param name="marked">Whether the link marks the end of the reply, as <see cref="End"/> says: only then is a block
    /// of unknown length taken, and no newline asked for after one of a known length.</param>
    /// <param name="form">What stands around them; null: by the standard.</param>
    public void Begin(int bound, int count = 1, bool marked = false, BlockForm? form = null)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(bound);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(bound, BlockHeader.Limit);
        ArgumentOutOfRangeException.ThrowIfLessThan(count, 1);
        Dispose();
        (_bound, _due, _marked, _form) = (bound, count, marked, form ?? BlockForm.Standard);
    }

    /// <summary>Takes note that the link marked the end of the reply.</summary>
    /// <exception cref="ReplyException">The reply is not whole.</exception>
    public void End()
    {
        if (IsWhole)
        {
            return;
        }

        if (_length < 0 || _blocks.Count < _due)
        {
            throw Missing();
        }

        var rental = _blocks[^1].Rental;
        if (_indefinite)
        {
            // IEEE 488.2, 8.7.10: the newline belongs to the end, not to the data.
            _length = _filled > 0 && rental[_filled - 1] == '\n' ? _filled - 1
                : throw new ReplyException(ReplyFault.Unterminated, rental.AsSpan(0, Math.Min(_filled, 80)));
            _blocks[^1] = (rental, _length);
        }
        else if (_filled != _length)
        {
            throw Missing();
        }

        IsWhole = true;
    }

    /// <summary>The bytes of a block, once the reply is whole; valid until the next <see cref="Begin"/> or
    /// disposal.</summary>
    /// <param name="index">Which one, from 0.</param>
    public ReadOnlySpan<byte> Block(int index) => _blocks[index].Rental.AsSpan(0, _blocks[index].Length);

    /// <summary>Takes note of bytes that were put into <see cref="Space"/>.</summary>
    /// <param name="count">How many.</param>
    /// <exception cref="ReplyException">They are no block, or not of the length that is due.</exception>
    public void Advance(int count)
    {
        if (_length < 0)
        {
            _headFilled += count;
        }
        else
        {
            _filled += count;
        }

        while (!IsWhole && (_length < 0 ? TryTakeHead() : TryTakeEnd()))
        {
        }
    }

    /// <summary>What is missing, for a stream that ended or a deadline that passed before the reply was
    /// whole.</summary>
    public ReplyException Missing()
    {
        var seen = _length < 0 ? _head.AsSpan(0, _headFilled) : _blocks[^1].Rental.AsSpan(0, Math.Min(_filled, 80));
        var fault = _length < 0 && seen.IsEmpty ? ReplyFault.Empty
            : _length < 0 || _filled < _length ? ReplyFault.TruncatedBlock
            : ReplyFault.Unterminated;
        return new ReplyException(fault, seen);
    }

    /// <summary>Gives the buffers back to the pool.</summary>
    public void Dispose()
    {
        foreach (var (rental, _) in _blocks)
        {
            ArrayPool<byte>.Shared.Return(rental);
        }

        _blocks.Clear();
        (_headFilled, _filled, _length, IsWhole, _indefinite) = (0, 0, -1, false, false);
    }

    private bool TryTakeHead()
    {
        var head = _head.AsSpan(0, _headFilled);
        var before = 0;
        if (_blocks.Count == 0 && !_form.IsBegun(head, out before))
        {
            return false;
        }

        head = head[before..];
        _indefinite = _marked && head.TrimStart(" \t\r"u8).StartsWith("#0"u8);
        var header = _indefinite ? new BlockHeader(head.IndexOf((byte)'#') + 2, _bound) : default;
        if (!_indefinite && !BlockHeader.TryRead(head, _bound, out header))
        {
            return false;
        }

        var rental = ArrayPool<byte>.Shared.Rent(header.Length + Ending);
        _blocks.Add((rental, header.Length));
        _length = header.Length;
        var start = before + header.Start;
        _filled = Math.Min(_headFilled - start, header.Length + Ending);
        _head.AsSpan(start, _filled).CopyTo(rental);
        Keep(_head.AsSpan(start + _filled, _headFilled - start - _filled));
        return true;
    }

    private bool TryTakeEnd()
    {
        var rental = _blocks[^1].Rental;
        if (_indefinite)
        {
            return _filled <= _length + 1
                ? false : throw new ReplyException(ReplyFault.TooLong, rental.AsSpan(0, Math.Min(_filled, 80)));
        }

        var tail = rental.AsSpan(_length, Math.Max(_filled - _length, 0));
        if (_form.End == BlockEnd.Nothing && _filled >= _length && _blocks.Count == _due)
        {
            _headFilled = tail.TrimStart("\r\n"u8).IsEmpty ? _headFilled : _headFilled + tail.Length;
            return IsWhole = true;
        }

        if (_form.End == BlockEnd.CarriageReturn && !tail.IsEmpty && tail[0] == '\r')
        {
            _headFilled += tail.Length - (tail is [_, (byte)'\n', ..] ? 2 : 1);
            return IsWhole = true;
        }

        if (tail.IsEmpty || (tail[0] == '\r' && tail.Length == 1))
        {
            return false;
        }

        if (tail[0] == ',' && _blocks.Count < _due)
        {
            // What came after the comma goes before what was kept: it is the beginning of the next head.
            _head.AsSpan(0, _headFilled).CopyTo(_head.AsSpan(tail.Length - 1));
            tail[1..].CopyTo(_head);
            (_headFilled, _length) = (_headFilled + tail.Length - 1, -1);
            return true;
        }

        var newline = tail[0] == '\r' ? 1 : 0;
        if (tail[newline] != '\n')
        {
            throw new ReplyException(
                tail[0] switch
                {
                    (byte)';' => ReplyFault.TooManyUnits,
                    (byte)',' => ReplyFault.TooManyElements,
                    _ => ReplyFault.TrailingData,
                },
                tail);
        }

        _headFilled += tail.Length - newline - 1;
        return _blocks.Count == _due ? IsWhole = true : throw new ReplyException(ReplyFault.WrongCount, Block(0));
    }

    private void Keep(ReadOnlySpan<byte> rest)
    {
        rest.CopyTo(_head);
        _headFilled = rest.Length;
    }
}
