using System.Text;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>The bytes of a program message: printable ASCII on one line, and the newline that ends it. Keeps the last
/// one, since an instrument with its echo on sends it back.</summary>
internal sealed class ProgramMessage
{
    /// <summary>The longest message, bytes, its newline included.</summary>
    public const int Longest = 1024;

    private readonly byte[] _bytes = new byte[Longest];
    private int _length;

    /// <summary>The last message without its newline.</summary>
    public ReadOnlySpan<byte> Text => _bytes.AsSpan(0, Math.Max(0, _length - 1));

    /// <summary>Writes a message.</summary>
    /// <returns>Its bytes, the newline included; gone with the next one.</returns>
    /// <exception cref="ArgumentException">Empty, too long, or not printable ASCII on one line: a caller's
    /// mistake.</exception>
    public ReadOnlySpan<byte> Write(string message)
    {
        _length = Encode(message, _bytes);
        return _bytes.AsSpan(0, _length);
    }

    /// <summary>A line as the reply to the last message.</summary>
    /// <exception cref="ReplyException">The line is the message itself.</exception>
    public ReadOnlySpan<byte> Reply(ReadOnlyMemory<byte> line) =>
        line.Span.SequenceEqual(Text) ? throw new ReplyException(ReplyFault.Echo, line.Span) : line.Span;

    /// <summary>Writes a message into a caller's buffer.</summary>
    /// <returns>Bytes written, the newline included.</returns>
    /// <inheritdoc cref="Write" path="/exception"/>
    public static int Encode(string message, Span<byte> buffer)
    {
        if (message.Length is 0 or >= Longest || message.AsSpan().ContainsAnyExceptInRange(' ', '~'))
        {
            throw new ArgumentException(
                $"'{Printable.Text(message)}' is no program message of printable ASCII on one line");
        }

        var length = Encoding.ASCII.GetBytes(message, buffer);
        buffer[length] = (byte)'\n';
        return length + 1;
    }
}
