namespace BenchRunner.Instruments.Replies;

/// <summary>Replies of several values: units joined by semicolons (IEEE 488.2, 8.4.1), elements joined by commas
/// (8.4.2).</summary>
public static class ReplyList
{
    /// <summary>Splits a reply into its units.</summary>
    /// <param name="reply">One reply without its end.</param>
    /// <param name="count">How many were asked for; 0: any number.</param>
    /// <exception cref="ReplyException">A unit is empty, or their number is another.</exception>
    public static IReadOnlyList<string> Units(ReadOnlySpan<byte> reply, int count = 0) =>
        Counted(Texts(reply, (byte)';', ReplyFault.EmptyUnit), count, reply);

    /// <summary>Splits a reply of one unit into its elements.</summary>
    /// <param name="reply">One reply without its end.</param>
    /// <param name="count">How many were asked for; 0: any number.</param>
    /// <exception cref="ReplyException">An element is empty, or their number is another.</exception>
    public static IReadOnlyList<string> Elements(ReadOnlySpan<byte> reply, int count = 0) =>
        Counted(Texts(ReplyText.Value(reply), (byte)',', ReplyFault.EmptyElement), count, reply);

    /// <summary>Reads a list of numbers, as <see cref="ReplyNumber.Parse"/> reads each.</summary>
    /// <param name="reply">One reply without its end.</param>
    /// <param name="count">How many were asked for; 0: any number.</param>
    /// <exception cref="ReplyException">An element is empty or no number, or their number is another.</exception>
    public static IReadOnlyList<double> Numbers(ReadOnlySpan<byte> reply, int count = 0)
    {
        var value = ReplyText.Value(reply);
        var numbers = new List<double>();
        foreach (var part in Split(value, (byte)',', ReplyFault.EmptyElement))
        {
            numbers.Add(ReplyNumber.Parse(value[part]));
        }

        return Counted(numbers, count, reply);
    }

    private static List<string> Texts(ReadOnlySpan<byte> reply, byte separator, ReplyFault whenEmpty)
    {
        var texts = new List<string>();
        foreach (var part in Split(reply, separator, whenEmpty))
        {
            texts.Add(ReplyText.Decode(ReplyText.Trim(reply[part])));
        }

        return texts;
    }

    /// <summary>Splits at a separator that stands outside strings and blocks.</summary>
    internal static List<Range> Split(ReadOnlySpan<byte> text, byte separator, ReplyFault whenEmpty)
    {
        var parts = new List<Range>();
        var start = 0;
        for (var i = 0; i <= text.Length; i++)
        {
            if (i < text.Length && text[i] != separator)
            {
                i = Past(text, i) - 1;
                continue;
            }

            if (ReplyText.Trim(text[start..i]).IsEmpty)
            {
                throw new ReplyException(whenEmpty, text);
            }

            parts.Add(start..i);
            start = i + 1;
        }

        return parts;
    }

    /// <summary>Index after the string, block or single byte that stands there.</summary>
    private static int Past(ReadOnlySpan<byte> text, int at)
    {
        var rest = text[at..];
        if (rest[0] is (byte)'"' or (byte)'\'')
        {
            var end = ReplyString.End(rest);
            return end < 0 ? throw new ReplyException(ReplyFault.UnterminatedString, text) : at + end;
        }

        if (rest[0] == '#' && rest.Length > 1 && char.IsAsciiDigit((char)rest[1]))
        {
            var whole = BlockHeader.TryRead(rest, int.MaxValue, out var header) && header.End <= rest.Length;
            return whole ? at + (int)header.End : throw new ReplyException(ReplyFault.TruncatedBlock, text);
        }

        return at + 1;
    }

    private static List<T> Counted<T>(List<T> parts, int count, ReadOnlySpan<byte> reply) =>
        count != 0 && parts.Count != count ? throw new ReplyException(ReplyFault.WrongCount, reply) : parts;
}
