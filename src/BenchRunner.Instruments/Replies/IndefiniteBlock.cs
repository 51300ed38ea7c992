namespace BenchRunner.Instruments.Replies;

/// <summary>Indefinite length arbitrary block response data (IEEE 488.2, 8.7.10): <c>#0</c>, bytes, then NL with
/// END.</summary>
/// <remarks>Only for a link that marks the end of a message. A stream does not: there it is refused by
/// <see cref="BlockHeader.TryRead"/>, since its last newline cannot be told from data.</remarks>
public static class IndefiniteBlock
{
    /// <summary>The bytes of the block.</summary>
    /// <param name="message">One whole message, whose end the link marked.</param>
    /// <exception cref="ReplyException">No such block, or no newline at its end.</exception>
    public static ReadOnlySpan<byte> Read(ReadOnlySpan<byte> message)
    {
        var block = message.TrimStart(" \t\r"u8);
        return !block.StartsWith("#0"u8) ? throw new ReplyException(ReplyFault.BadBlockHeader, message)
            : block[^1] != '\n' ? throw new ReplyException(ReplyFault.Unterminated, message)
            : block[2..^1];
    }
}
