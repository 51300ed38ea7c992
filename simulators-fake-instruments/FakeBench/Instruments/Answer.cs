namespace FakeBench.Instruments;

/// <summary>What goes out on the link after a message, and what goes wrong on its way.</summary>
/// <param name="Bytes">The reply with its terminator; empty: none is due.</param>
public sealed record Answer(byte[] Bytes)
{
    /// <summary>How late it goes out.</summary>
    public TimeSpan Late { get; init; }

    /// <summary>Whether the link is reset after half of it.</summary>
    public bool CutShort { get; init; }

    /// <summary>Bytes of a write; 0: all of them at once.</summary>
    public int Piece { get; init; }

    /// <summary>Time between two writes.</summary>
    public TimeSpan Gap { get; init; }

    /// <summary>Whether the link stays open from here on and is neither read nor written.</summary>
    public bool Deaf { get; init; }
}
