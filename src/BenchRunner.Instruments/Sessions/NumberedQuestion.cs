using System.Globalization;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>A question asked together with a number that its reply must bring back, and with the event register, in one
/// message.</summary>
/// <remarks>
/// On a stream a reply that is sent twice, the second time late, looks like the answer to the next question. The number
/// tells; it is the event status enable register (IEEE 488.2, 10.10), of no other use here. The event register (10.12)
/// says by its bit 7 whether the instrument was switched on since it was last read.
/// </remarks>
internal sealed class NumberedQuestion
{
    /// <summary>Numbers 1 to 100; those above are the resynchronisation's.</summary>
    private const int Numbers = 100;

    private const int PowerOn = 1 << 7;

    private int _number;

    /// <summary>Whether the last reply said that the instrument was switched on since it was asked before.</summary>
    public bool SwitchedOn { get; private set; }

    /// <summary>The next message for a question.</summary>
    public string Next(string query)
    {
        _number = (_number % Numbers) + 1;
        var root = query[0] is '*' or ':' ? "" : ":";
        return string.Create(CultureInfo.InvariantCulture, $"*ESE {_number};*ESE?;*ESR?;{root}{query}");
    }

    /// <summary>Reads the reply to the last message.</summary>
    /// <exception cref="ReplyException">Another number: the reply to an earlier question. Or no such reply.</exception>
    public T Parse<T>(ReadOnlySpan<byte> reply, ReplyParser<T> parse)
    {
        var first = reply.IndexOf((byte)';');
        var second = first < 0 ? -1 : reply[(first + 1)..].IndexOf((byte)';');
        if (second < 0)
        {
            throw new ReplyException(ReplyFault.WrongCount, reply);
        }

        if (ReplyInteger.Parse(reply[..first]) != _number)
        {
            throw new ReplyException(ReplyFault.WrongNumber, reply);
        }

        var events = ReplyInteger.Parse(reply.Slice(first + 1, second));
        SwitchedOn = (events & PowerOn) != 0;
        return parse(reply[(first + second + 2)..]);
    }
}
