using System.Text;

namespace BenchRunner.Instruments.Replies;

/// <summary>Character response data (IEEE 488.2, 8.7.1) and booleans (SCPI-1999 volume 1, 7.3).</summary>
public static class ReplyWord
{
    /// <summary>Reads one word, e.g. <c>NORM</c>.</summary>
    /// <returns>The word in upper case, as the standard sends it.</returns>
    /// <exception cref="ReplyException">Empty, or no word.</exception>
    public static string Parse(ReadOnlySpan<byte> reply)
    {
        var value = ReplyText.Value(reply);
        if (!char.IsAsciiLetter((char)value[0]))
        {
            throw ReplyText.Refusal(value, ReplyFault.NotAWord);
        }

        foreach (var c in value)
        {
            if (!char.IsAsciiLetterOrDigit((char)c) && c != '_')
            {
                throw ReplyText.Refusal(value, ReplyFault.NotAWord);
            }
        }

        return Encoding.ASCII.GetString(value).ToUpperInvariant();
    }

    /// <summary>Reads 0 or 1; the words OFF and ON are taken too.</summary>
    /// <exception cref="ReplyException">Empty, or neither.</exception>
    public static bool ParseBoolean(ReadOnlySpan<byte> reply)
    {
        var value = ReplyText.Value(reply);
        if (Ascii.EqualsIgnoreCase(value, "ON"u8))
        {
            return true;
        }

        if (Ascii.EqualsIgnoreCase(value, "OFF"u8))
        {
            return false;
        }

        if (!ReplyNumber.IsNumeric(value))
        {
            throw ReplyText.Refusal(value, ReplyFault.NotABoolean);
        }

        return ReplyNumber.Parse(value) switch
        {
            0 => false,
            1 => true,
            _ => throw new ReplyException(ReplyFault.NotABoolean, value),
        };
    }
}
