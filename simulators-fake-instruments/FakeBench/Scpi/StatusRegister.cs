namespace FakeBench.Scpi;

/// <summary>One SCPI status register: condition, event (latches rising bits until read), enable.</summary>
/// <remarks>Source: SCPI-1999 volume 2, 20; positive transitions only. Bit 15 is always 0.</remarks>
public sealed class StatusRegister
{
    private const int Usable = 0x7FFF;
    private int _event;

    /// <summary>What is so now.</summary>
    public int Condition { get; private set; }

    /// <summary>Bits that reach the status byte.</summary>
    public int Enable { get; private set; }

    /// <summary>Whether an enabled event waits to be read.</summary>
    public bool Summary => (_event & Enable) != 0;

    /// <summary>Takes over what is so now; bits that rise are latched as events.</summary>
    public void SetCondition(int condition)
    {
        _event |= condition & ~Condition;
        Condition = condition & Usable;
    }

    /// <summary>Chooses the bits that reach the status byte.</summary>
    public void SetEnable(int enable) => Enable = enable & Usable;

    /// <summary>Reads the events, which clears them.</summary>
    public int ReadEvent()
    {
        int was = _event;
        _event = 0;
        return was;
    }
}
