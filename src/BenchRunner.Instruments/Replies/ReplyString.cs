namespace BenchRunner.Instruments.Replies;

/// <summary>String response data (IEEE 488.2, 8.7.8): in double quotes, a quote inside doubled. Single quotes are
/// taken too.</summary>
public static class ReplyString
{
    /// <summary>Reads one string.</summary>
    /// <returns>What stands between the quotes. Control characters are kept as data: escape them wherever shown
    /// (<see cref="Printable"/>). Bytes that are no UTF-8 become U+FFFD.</returns>
    /// <exception cref="ReplyException">Empty, not quoted, not closed, or something after it.</exception>
    public static string Parse(ReadOnlySpan<byte> reply)
    {
        var value = ReplyText.Value(reply);
        var quote = value[0];
        if (quote is not ((byte)'"' or (byte)'\''))
        {
            throw new ReplyException(ReplyFault.NotAString, value);
        }

        var end = End(value);
        if (end < 0)
        {
            throw new ReplyException(ReplyFault.UnterminatedString, value);
        }

        var rest = ReplyText.Trim(value[end..]);
        if (!rest.IsEmpty)
        {
            var fault = rest[0] switch
            {
                (byte)',' => ReplyFault.TooManyElements,
                (byte)';' => ReplyFault.TooManyUnits,
                _ => ReplyFault.TrailingData,
            };
            throw new ReplyException(fault, value);
        }

        var text = ReplyText.Decode(value[1..(end - 1)]);
        return text.Replace(new string((char)quote, 2), ((char)quote).ToString(), StringComparison.Ordinal);
    }

    /// <summary>Index after the closing quote of the string that the text begins with; −1: not closed.</summary>
    internal static int End(ReadOnlySpan<byte> text)
    {
        var quote = text[0];
        for (var i = 1; i < text.Length; i++)
        {
            if (text[i] != quote)
            {
                continue;
            }

            if (i + 1 < text.Length && text[i + 1] == quote)
            {
                i++;
            }
            else
            {
                return i + 1;
            }
        }

        return -1;
    }
}
