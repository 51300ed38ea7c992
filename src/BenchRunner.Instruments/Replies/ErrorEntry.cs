namespace BenchRunner.Instruments.Replies;

/// <summary>One entry of an instrument's error queue, the answer to <c>SYSTem:ERRor?</c> (SCPI-1999 volume 2,
/// 21.8).</summary>
/// <param name="Number">The number; 0 says that the queue is empty, negative numbers are the standard's.</param>
/// <param name="Text">What the instrument calls it; null where it gives the number alone.</param>
/// <param name="Detail">What it adds after the first semicolon; null where nothing.</param>
public sealed record ErrorEntry(int Number, string? Text, string? Detail)
{
    /// <summary>The number that says that entries were lost: the instrument's state is not known.</summary>
    public const int QueueOverflow = -350;

    /// <summary>Whether the queue was empty. The number decides, whatever the text.</summary>
    public bool IsNone => Number == 0;

    /// <summary>Whether it speaks of the instrument's own hardware: -24x hardware, -31x memory and calibration data, -33x
    /// self-test (SCPI-1999 volume 2, 21.8.9 to 21.8.11).</summary>
    public bool IsOfHardware => Number is (<= -240 and >= -249) or (<= -310 and >= -319) or (<= -330 and >= -339);

    /// <summary>Reads one entry.</summary>
    /// <exception cref="ReplyException">No entry, or a string that is not closed.</exception>
    public static ErrorEntry Parse(ReadOnlySpan<byte> reply)
    {
        var value = ReplyText.Value(reply);
        var comma = value.IndexOf((byte)',');
        var number = Code(comma < 0 ? value : value[..comma], value);
        if (comma < 0)
        {
            return new ErrorEntry(number, null, null);
        }

        var text = ReplyText.Trim(value[(comma + 1)..]);
        var words = !text.IsEmpty && text[0] is (byte)'"' or (byte)'\''
            ? ReplyString.Parse(text)
            : ReplyText.Decode(text);
        var semicolon = words.IndexOf(';', StringComparison.Ordinal);
        return semicolon < 0
            ? new ErrorEntry(number, words, null)
            : new ErrorEntry(number, words[..semicolon], words[(semicolon + 1)..]);
    }

    /// <summary>The entry as a message shows it, control characters escaped.</summary>
    public override string ToString() =>
        Printable.Text(FormattableString.Invariant($"{Number} {Text}{(Detail is null ? "" : "; " + Detail)}"));

    private static int Code(ReadOnlySpan<byte> digits, ReadOnlySpan<byte> value)
    {
        if (!ReplyNumber.IsNumeric(ReplyText.Trim(digits)))
        {
            throw new ReplyException(ReplyFault.NotAnErrorEntry, value);
        }

        var number = ReplyInteger.Parse(digits);
        return number is < short.MinValue or > short.MaxValue
            ? throw new ReplyException(ReplyFault.OutOfRange, value)
            : (int)number;
    }

    /// <summary>Whether a line is a number and a quoted text, as no answer of a measurement or setting is.</summary>
    internal static bool IsOne(ReadOnlySpan<byte> line) => line.IndexOf(",\""u8) is > 0 and var comma
        && ReplyNumber.IsNumeric(ReplyText.Trim(line[..comma]));
}
