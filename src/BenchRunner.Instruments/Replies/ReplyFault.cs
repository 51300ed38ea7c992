namespace BenchRunner.Instruments.Replies;

/// <summary>What is wrong with a reply.</summary>
public enum ReplyFault
{
    /// <summary>Nothing where a value is due.</summary>
    Empty,

    /// <summary>No number of any form of IEEE 488.2, 8.7.</summary>
    NotANumber,

    /// <summary>A number with a fraction where a whole one is due.</summary>
    NotAnInteger,

    /// <summary>A number that the due type cannot hold.</summary>
    OutOfRange,

    /// <summary>Neither 0 nor 1, nor the words OFF or ON.</summary>
    NotABoolean,

    /// <summary>No word of letters, digits and underscores.</summary>
    NotAWord,

    /// <summary>No string in quotes.</summary>
    NotAString,

    /// <summary>A string without its closing quote.</summary>
    UnterminatedString,

    /// <summary>No newline at the end of the reply.</summary>
    Unterminated,

    /// <summary>A byte that no text reply may hold.</summary>
    BadCharacter,

    /// <summary>No <c>#</c>, digit and byte count where a block is due.</summary>
    BadBlockHeader,

    /// <summary>Fewer bytes than the block announced.</summary>
    TruncatedBlock,

    /// <summary>Something between the value and the end of the reply.</summary>
    TrailingData,

    /// <summary>Longer than what is due, or than this program takes.</summary>
    TooLong,

    /// <summary>A block of unknown length on a link that cannot mark its end.</summary>
    IndefiniteBlockOnStream,

    /// <summary>A comma where one element is due.</summary>
    TooManyElements,

    /// <summary>A semicolon where one unit is due.</summary>
    TooManyUnits,

    /// <summary>Nothing between two commas.</summary>
    EmptyElement,

    /// <summary>Nothing between two semicolons.</summary>
    EmptyUnit,

    /// <summary>Another number of elements or units than asked for.</summary>
    WrongCount,

    /// <summary>A block that holds no whole number of elements.</summary>
    BadLength,

    /// <summary>No maker and model in the answer to <c>*IDN?</c>.</summary>
    NotAnIdentity,

    /// <summary>No number at the start of an entry of the error queue.</summary>
    NotAnErrorEntry,

    /// <summary>The command itself came back.</summary>
    Echo,

    /// <summary>The instrument broke the reply off: something else was sent before it was read.</summary>
    Interrupted,

    /// <summary>Something else where the command itself must come back.</summary>
    NoEcho,

    /// <summary>Another number than the one that was asked with: the reply to an earlier question.</summary>
    WrongNumber,
}
