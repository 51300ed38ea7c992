using System.Text;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>The bytes of a program message: printable ASCII on one line, and the terminator that ends it. Keeps the last
/// one, since an instrument with its echo on sends it back.</summary>
/// <param name="terminator">What ends a message.</param>
internal sealed class ProgramMessage(Terminator terminator)
{
    /// <summary>The longest message, bytes, its terminator included.</summary>
    public const int Longest = 1024;

    private const int LongestEnd = 2;

    private readonly byte[] _bytes = new byte[Longest];
    private int _length;

    /// <summary>The last message without its terminator.</summary>
    public ReadOnlySpan<byte> Text => _bytes.AsSpan(0, Math.Max(0, _length - End(terminator).Length));

    /// <summary>Writes a message.</summary>
    /// <returns>Its bytes, the terminator included; gone with the next one.</returns>
    /// <exception cref="ArgumentException">Empty, too long, or not printable ASCII on one line: a caller's
    /// mistake.</exception>
    public ReadOnlySpan<byte> Write(string message)
    {
        _length = Encode(message, terminator, _bytes);
        return _bytes.AsSpan(0, _length);
    }

    /// <summary>A line as the reply to the last message.</summary>
    /// <exception cref="ReplyException">The line is the message itself.</exception>
    public ReadOnlySpan<byte> Reply(ReadOnlyMemory<byte> line) =>
        line.Span.SequenceEqual(Text) ? throw new ReplyException(ReplyFault.Echo, line.Span) : line.Span;

    /// <summary>Writes a message into a caller's buffer.</summary>
    /// <returns>Bytes written, the terminator included.</returns>
    /// <inheritdoc cref="Write" path="/exception"/>
    public static int Encode(string message, Terminator terminator, Span<byte> buffer)
    {
        if (message.Length is 0 or > Longest - LongestEnd || message.AsSpan().ContainsAnyExceptInRange(' ', '~'))
        {
            throw new ArgumentException(
                $"'{Printable.Text(message)}' is no program message of printable ASCII on one line");
        }

        var length = Encoding.ASCII.GetBytes(message, buffer);
        var end = End(terminator);
        end.CopyTo(buffer[length..]);
        return length + end.Length;
    }

    /// <summary>The bytes that end a message.</summary>
    public static ReadOnlySpan<byte> End(Terminator terminator) => terminator switch
    {
        Terminator.CarriageReturnNewLine => "\r\n"u8,
        Terminator.CarriageReturn => "\r"u8,
        _ => "\n"u8,
    };
}
