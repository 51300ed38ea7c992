namespace BenchRunner.Instruments.Replies;

/// <summary>Framing of text replies on a stream, which has no message edges: a reply ends with NL (IEEE 488.2,
/// 8.5).</summary>
public static class ReplyLine
{
    /// <summary>The longest reply taken, bytes: 64 KiB (house rule).</summary>
    public const int Limit = 64 * 1024;

    /// <summary>Finds the first reply in what has come so far.</summary>
    /// <param name="bytes">What has come so far.</param>
    /// <param name="quoted">Whether a string is due, inside whose quotes a newline is data.</param>
    /// <param name="reply">The reply, without its end and a carriage return round it.</param>
    /// <param name="consumed">Bytes that the reply and its end take.</param>
    /// <param name="terminator">What ends it: NL, or CR where an instrument sends that alone.</param>
    /// <returns>Whether a reply is whole; false: more must come. A carriage return alone ends nothing.</returns>
    /// <exception cref="ReplyException">Longer than <see cref="Limit"/>.</exception>
    public static bool TryRead(
        ReadOnlySpan<byte> bytes, bool quoted, out Range reply, out int consumed, byte terminator = (byte)'\n')
    {
        var end = quoted ? QuotedEnd(bytes, terminator) : bytes.IndexOf(terminator);
        if (end > Limit || (end < 0 && bytes.Length > Limit))
        {
            throw new ReplyException(ReplyFault.TooLong, bytes);
        }

        if (end < 0)
        {
            (reply, consumed) = (default, 0);
            return false;
        }

        (reply, consumed) = (WithoutReturns(bytes[..end]), end + 1);
        return true;
    }

    /// <summary>A reply that came as one message whose end the link marked, without a newline at its end and carriage
    /// returns round it. A newline elsewhere stays: no parser takes it.</summary>
    /// <param name="message">The whole message.</param>
    public static ReadOnlyMemory<byte> Trim(ReadOnlyMemory<byte> message)
    {
        var line = message.Span.EndsWith("\n"u8) ? message[..^1] : message;
        return line[WithoutReturns(line.Span)];
    }

    private static Range WithoutReturns(ReadOnlySpan<byte> line)
    {
        var start = 0;
        var last = line.Length;
        while (start < last && line[start] == '\r')
        {
            start++;
        }

        while (last > start && line[last - 1] == '\r')
        {
            last--;
        }

        return start..last;
    }

    private static int QuotedEnd(ReadOnlySpan<byte> bytes, byte terminator)
    {
        byte open = 0;
        for (var i = 0; i < bytes.Length; i++)
        {
            var c = bytes[i];
            if (open == 0 && c == terminator)
            {
                return i;
            }

            // A doubled quote closes and opens again, which comes to the same.
            open = c == open ? (byte)0 : open == 0 && c is (byte)'"' or (byte)'\'' ? c : open;
        }

        return -1;
    }
}
