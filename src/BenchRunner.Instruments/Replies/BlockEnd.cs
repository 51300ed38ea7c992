namespace BenchRunner.Instruments.Replies;

/// <summary>What follows the last byte of a reply of blocks.</summary>
public enum BlockEnd
{
    /// <summary>NL or CR NL (IEEE 488.2, 8.5).</summary>
    NewLine,

    /// <summary>Carriage return alone.</summary>
    CarriageReturn,

    /// <summary>Nothing: the count alone ends it. A carriage return or newline that comes all the same is
    /// dropped.</summary>
    Nothing,
}
