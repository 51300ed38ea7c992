namespace BenchRunner.Instruments.Replies;

/// <summary>Head of definite length arbitrary block response data (IEEE 488.2, 8.7.9): <c>#</c>, a digit n, n digits
/// of byte count.</summary>
/// <param name="Start">Index of the block's first byte.</param>
/// <param name="Length">Bytes in the block.</param>
public readonly record struct BlockHeader(int Start, int Length)
{
    /// <summary>The longest block taken, bytes: 64 MiB (house rule).</summary>
    public const int Limit = 64 * 1024 * 1024;

    /// <summary>Longest head: <c>#</c>, the digit, nine digits.</summary>
    internal const int Longest = 11;

    /// <summary>Index after the block's last byte.</summary>
    public long End => (long)Start + Length;

    /// <summary>Reads the head; white space before it is taken.</summary>
    /// <param name="bytes">What has come so far.</param>
    /// <param name="bound">The longest block that is due, bytes.</param>
    /// <param name="header">The head, where whole.</param>
    /// <returns>Whether the head is whole; false: more must come.</returns>
    /// <exception cref="ReplyException">No head, a block of unknown length (which a stream cannot end), or one longer
    /// than
    /// the bound: refused on the digits alone, before anything is allocated.</exception>
    public static bool TryRead(ReadOnlySpan<byte> bytes, int bound, out BlockHeader header)
    {
        header = default;
        var at = bytes.IndexOfAnyExcept(" \t\r"u8);
        if (at < 0)
        {
            return bytes.Length <= Longest ? false : throw new ReplyException(ReplyFault.BadBlockHeader, bytes);
        }

        if (bytes[at] != '#')
        {
            throw new ReplyException(ReplyFault.BadBlockHeader, bytes);
        }

        if (at + 1 == bytes.Length)
        {
            return false;
        }

        var digits = bytes[at + 1] - '0';
        if (digits is < 0 or > 9)
        {
            throw new ReplyException(ReplyFault.BadBlockHeader, bytes);
        }

        if (digits == 0)
        {
            throw new ReplyException(ReplyFault.IndefiniteBlockOnStream, bytes);
        }

        return TryReadLength(bytes, at + 2, digits, bound, out header);
    }

    private static bool TryReadLength(ReadOnlySpan<byte> bytes, int at, int digits, int bound, out BlockHeader header)
    {
        header = default;
        long length = 0;
        for (var i = at; i < at + digits; i++)
        {
            if (i == bytes.Length)
            {
                return false;
            }

            if (!char.IsAsciiDigit((char)bytes[i]))
            {
                throw new ReplyException(ReplyFault.BadBlockHeader, bytes);
            }

            length = (length * 10) + (bytes[i] - '0');
        }

        if (length > bound)
        {
            throw new ReplyException(ReplyFault.TooLong, bytes);
        }

        header = new BlockHeader(at + digits, (int)length);
        return true;
    }
}
