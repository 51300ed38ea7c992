using System.Text;
using System.Text.Unicode;

namespace BenchRunner.Instruments.Replies;

/// <summary>What all readers of one text value share: white space, bytes that cannot be, separators.</summary>
internal static class ReplyText
{
    /// <summary>The value without white space round it.</summary>
    /// <exception cref="ReplyException">Nothing is left.</exception>
    public static ReadOnlySpan<byte> Value(ReadOnlySpan<byte> reply)
    {
        var value = Trim(reply);
        return value.IsEmpty ? throw new ReplyException(ReplyFault.Empty, reply) : value;
    }

    /// <summary>The text without blanks, tabs, carriage returns and newlines round it.</summary>
    public static ReadOnlySpan<byte> Trim(ReadOnlySpan<byte> reply) => reply.Trim(" \t\r\n"u8);

    /// <summary>Why a plain value (number, word) was not understood: the most telling fault first.</summary>
    /// <param name="value">The value as it came.</param>
    /// <param name="otherwise">The fault where no more telling one is found.</param>
    public static ReplyException Refusal(ReadOnlySpan<byte> value, ReplyFault otherwise)
    {
        if (!Utf8.IsValid(value) || value.ContainsAnyInRange((byte)0, (byte)8)
            || value.ContainsAnyInRange((byte)14, (byte)31))
        {
            return new ReplyException(ReplyFault.BadCharacter, value);
        }

        if (value.Contains((byte)'"') || value.Contains((byte)'\''))
        {
            return new ReplyException(otherwise, value);
        }

        return new ReplyException(
            value.Contains((byte)';') ? ReplyFault.TooManyUnits
            : value.Contains((byte)',') ? ReplyFault.TooManyElements
            : otherwise,
            value);
    }

    /// <summary>Text of a reply; a sequence that is no UTF-8 becomes U+FFFD.</summary>
    public static string Decode(ReadOnlySpan<byte> text) => Encoding.UTF8.GetString(text);
}
