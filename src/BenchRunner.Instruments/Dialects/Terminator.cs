namespace BenchRunner.Instruments.Dialects;

/// <summary>What ends a message of text, both ways.</summary>
public enum Terminator
{
    /// <summary>Newline (IEEE 488.2, 7.5 and 8.5); a reply may end in CR NL too.</summary>
    NewLine,

    /// <summary>Carriage return and newline.</summary>
    CarriageReturnNewLine,

    /// <summary>Carriage return alone.</summary>
    CarriageReturn,
}
