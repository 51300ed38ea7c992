namespace BenchRunner.Instruments.Sessions;

/// <summary>Turns the bytes of one reply into a value; the bytes are gone when it returns.</summary>
/// <typeparam name="T">The value.</typeparam>
/// <param name="reply">The reply without its end, or the bytes of a block.</param>
/// <exception cref="Replies.ReplyException">The bytes are not what is due.</exception>
public delegate T ReplyParser<out T>(ReadOnlySpan<byte> reply);
