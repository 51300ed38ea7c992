using BenchRunner.Instruments.Roles;

namespace BenchRunner.Instruments.Replies;

/// <summary>The answer to <c>*IDN?</c> (IEEE 488.2, 10.14): maker, model, serial, firmware; 0 where not
/// known.</summary>
public static class ReplyIdentity
{
    /// <summary>The longest answer taken, bytes; the standard allows 72 characters.</summary>
    public const int Limit = 256;

    /// <summary>Reads the answer.</summary>
    /// <exception cref="ReplyException">Empty, too long, or not even maker and model.</exception>
    /// <remarks>Three fields are taken; of more than four, the rest belongs to the last.</remarks>
    public static InstrumentIdentity Parse(ReadOnlySpan<byte> reply)
    {
        var value = ReplyText.Value(reply);
        if (value.Length > Limit)
        {
            throw new ReplyException(ReplyFault.TooLong, value);
        }

        var text = ReplyText.Decode(value);
        var fields = text.Split(',', 4, StringSplitOptions.TrimEntries);
        if (fields.Length < 2 || fields[0].Length == 0 || fields[1].Length == 0)
        {
            throw new ReplyException(ReplyFault.NotAnIdentity, value);
        }

        return new InstrumentIdentity(
            Printable.Text(text, Limit), fields[0], fields[1], Known(fields, 2), Known(fields, 3));
    }

    private static string Known(string[] fields, int at) =>
        at >= fields.Length || fields[at] == "0" ? string.Empty : fields[at];
}
