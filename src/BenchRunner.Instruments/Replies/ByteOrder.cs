namespace BenchRunner.Instruments.Replies;

/// <summary>Which byte of an element comes first (SCPI-1999 volume 2, FORMat:BORDer).</summary>
public enum ByteOrder
{
    /// <summary>The high byte first: <c>NORMal</c>, what an instrument has after a reset.</summary>
    Normal,

    /// <summary>The low byte first: <c>SWAPped</c>.</summary>
    Swapped,
}
