namespace BenchRunner.Instruments.Replies;

/// <summary>Bytes that are not the reply that was due.</summary>
/// <remarks>Not to be confused with <see cref="Links.LinkException"/>, which the session makes of it and which names
/// the link.</remarks>
/// <param name="fault">What is wrong.</param>
/// <param name="found">What came; control characters are escaped in the message.</param>
public sealed class ReplyException(ReplyFault fault, string found)
    : Exception($"{Words(fault)}: '{Printable.Text(found, 80)}'")
{
    /// <summary>Makes the exception from raw bytes.</summary>
    /// <param name="fault">What is wrong.</param>
    /// <param name="found">What came.</param>
    public ReplyException(ReplyFault fault, ReadOnlySpan<byte> found)
        : this(fault, Printable.Latin(found, 80))
    {
    }

    /// <summary>What is wrong.</summary>
    public ReplyFault Fault { get; } = fault;

    private static string Words(ReplyFault fault) => fault switch
    {
        ReplyFault.Empty => "an empty reply",
        ReplyFault.NotANumber => "no number",
        ReplyFault.NotAnInteger => "no whole number",
        ReplyFault.OutOfRange => "a number out of range",
        ReplyFault.NotABoolean => "neither 0 nor 1",
        ReplyFault.NotAWord => "no word",
        ReplyFault.NotAString => "no quoted string",
        ReplyFault.UnterminatedString => "a string without its closing quote",
        ReplyFault.Unterminated => "a reply without its newline",
        ReplyFault.BadCharacter => "a byte that no text reply may hold",
        ReplyFault.BadBlockHeader => "no block header",
        ReplyFault.TruncatedBlock => "a block cut short",
        ReplyFault.TrailingData => "something after the end of the value",
        ReplyFault.TooLong => "longer than what is due",
        ReplyFault.IndefiniteBlockOnStream => "a block of unknown length",
        ReplyFault.TooManyElements => "more elements than the one that is due",
        ReplyFault.TooManyUnits => "more units than the one that is due",
        ReplyFault.EmptyElement => "an empty element",
        ReplyFault.EmptyUnit => "an empty unit",
        ReplyFault.WrongCount => "another number of elements than asked for",
        ReplyFault.BadLength => "no whole number of elements",
        ReplyFault.NotAnIdentity => "no identity of maker and model",
        ReplyFault.NotAnErrorEntry => "no entry of an error queue",
        ReplyFault.Echo => "the command itself, echoed",
        ReplyFault.Interrupted => "broken off by the instrument",
        ReplyFault.NoEcho => "not the echo that was due",
        ReplyFault.WrongNumber => "the reply to an earlier question",
        _ => throw new System.Diagnostics.UnreachableException(),
    };
}
