namespace BenchRunner.Instruments.Replies;

/// <summary>What one element of a block is (SCPI-1999 volume 2, FORMat:DATA).</summary>
public enum ElementFormat
{
    /// <summary><c>INTeger,8</c>.</summary>
    Integer8,

    /// <summary><c>UINTeger,8</c>.</summary>
    Unsigned8,

    /// <summary><c>INTeger,16</c>.</summary>
    Integer16,

    /// <summary><c>UINTeger,16</c>.</summary>
    Unsigned16,

    /// <summary><c>REAL,32</c>.</summary>
    Real32,

    /// <summary><c>REAL,64</c>.</summary>
    Real64,
}
