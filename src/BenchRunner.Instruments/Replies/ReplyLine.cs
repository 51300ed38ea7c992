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
    /// <returns>Whether a reply is whole; false: more must come. A carriage return alone ends nothing.</returns>
    /// <exception cref="ReplyException">Longer than <see cref="Limit"/>.</exception>
    public static bool TryRead(ReadOnlySpan<byte> bytes, bool quoted, out Range reply, out int consumed)
    {
        var end = quoted ? QuotedEnd(bytes) : bytes.IndexOf((byte)'\n');
        if (end > Limit || (end < 0 && bytes.Length > Limit))
        {
            throw new ReplyException(ReplyFault.TooLong, bytes);
        }

        if (end < 0)
        {
            (reply, consumed) = (default, 0);
            return false;
        }

        var start = 0;
        var last = end;
        while (start < last && bytes[start] == '\r')
        {
            start++;
        }

        while (last > start && bytes[last - 1] == '\r')
        {
            last--;
        }

        (reply, consumed) = (start..last, end + 1);
        return true;
    }

    private static int QuotedEnd(ReadOnlySpan<byte> bytes)
    {
        byte open = 0;
        for (var i = 0; i < bytes.Length; i++)
        {
            var c = bytes[i];
            if (open == 0 && c == '\n')
            {
                return i;
            }

            // A doubled quote closes and opens again, which comes to the same.
            open = c == open ? (byte)0 : open == 0 && c is (byte)'"' or (byte)'\'' ? c : open;
        }

        return -1;
    }
}
