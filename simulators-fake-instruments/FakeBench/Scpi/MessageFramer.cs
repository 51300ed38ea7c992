using System.Text;

namespace FakeBench.Scpi;

/// <summary>Cuts a stream of bytes into program messages: at each NL that stands in no block.</summary>
/// <remarks>
/// Pure: bytes in, messages out. A message longer than the bound is dropped up to its NL and reported. An NL ends a
/// message even inside a string: otherwise one missing quote would swallow every message after it.
/// </remarks>
public sealed class MessageFramer
{
    /// <summary>Longest message, bytes.</summary>
    public const int LongestMessage = 64 * 1024;

    private readonly StringBuilder _message = new();
    private char _quote;
    private int _blockDigits;
    private int _blockLeft;
    private int _count;
    private bool _hash;
    private bool _dropping;

    /// <summary>Takes bytes.</summary>
    /// <returns>The messages that became whole; null stands for one that was too long.</returns>
    public IReadOnlyList<string?> Take(ReadOnlySpan<byte> bytes)
    {
        var whole = new List<string?>();
        foreach (byte value in bytes)
        {
            char c = (char)value;
            if (c == '\n' && (_dropping || _blockLeft == 0))
            {
                whole.Add(_dropping ? null : _message.ToString());
                Restart();
            }
            else if (!_dropping)
            {
                _message.Append(c);
                Follow(c);
                _dropping = _message.Length > LongestMessage;
            }
        }

        return whole;
    }

    /// <summary>Takes the end of a message that the link marks (END), which ends it with or without an NL.</summary>
    /// <returns>The message that became whole so, if one was under way.</returns>
    public IReadOnlyList<string?> TakeEnd()
    {
        if (_message.Length == 0)
        {
            return [];
        }

        string? message = _dropping ? null : _message.ToString();
        Restart();
        return [message];
    }

    private void Follow(char c)
    {
        if (_blockLeft > 0)
        {
            FollowBlock(c);
        }
        else if (_quote != 0)
        {
            _quote = c == _quote ? '\0' : _quote;
        }
        else if (_hash)
        {
            _hash = false;
            (_blockDigits, _blockLeft) = c is >= '1' and <= '9' ? (c - '0', 1) : (0, 0);
            _count = 0;
        }
        else
        {
            _quote = c is '"' or '\'' ? c : '\0';
            _hash = c == '#';
        }
    }

    // While digits of the byte count are due, one more byte is always left.
    private void FollowBlock(char c)
    {
        if (_blockDigits == 0)
        {
            _blockLeft--;
            return;
        }

        if (!char.IsAsciiDigit(c))
        {
            (_blockDigits, _blockLeft) = (0, 0);
            return;
        }

        _count = Math.Min((_count * 10) + (c - '0'), LongestMessage);
        _blockDigits--;
        _blockLeft = _blockDigits > 0 ? 1 : _count;
    }

    private void Restart()
    {
        _message.Clear();
        (_quote, _blockDigits, _blockLeft, _hash, _dropping, _count) = ('\0', 0, 0, false, false, 0);
    }
}
