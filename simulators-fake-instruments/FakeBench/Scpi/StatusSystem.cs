namespace FakeBench.Scpi;

/// <summary>Status byte, standard event register, operation and questionable registers, error queue.</summary>
/// <remarks>Source: IEEE 488.2, 11; SCPI-1999 volume 2, 20.</remarks>
public sealed class StatusSystem
{
    private const int PowerOnBit = 7;
    private int _events = 1 << PowerOnBit;

    /// <summary>Error queue.</summary>
    public ErrorList Errors { get; } = new();

    /// <summary>Operation register.</summary>
    public StatusRegister Operation { get; } = new();

    /// <summary>Questionable register.</summary>
    public StatusRegister Questionable { get; } = new();

    /// <summary>Enable mask of the standard event register (<c>*ESE</c>).</summary>
    public int EventEnable { get; set; }

    /// <summary>Service request enable mask (<c>*SRE</c>); bit 6 does not exist in it.</summary>
    public int ServiceEnable { get; private set; }

    /// <summary>Sets the service request enable mask.</summary>
    public void SetServiceEnable(int mask) => ServiceEnable = mask & ~(1 << 6);

    /// <summary>Records an error in queue and standard event register.</summary>
    public void Report(int number, string? detail)
    {
        foreach (int effective in Errors.Add(number, detail))
        {
            if (StandardErrors.EventBit(effective) is { } bit)
            {
                _events |= 1 << bit;
            }
        }
    }

    /// <summary>Sets the operation-complete bit.</summary>
    public void OperationComplete() => _events |= 1;

    /// <summary>Reads the standard event register, which clears it.</summary>
    public int ReadEvents()
    {
        int was = _events;
        _events = 0;
        return was;
    }

    /// <summary>Clears events and queue; enables stay (<c>*CLS</c>).</summary>
    public void Clear()
    {
        Errors.Clear();
        _ = ReadEvents();
        _ = Operation.ReadEvent();
        _ = Questionable.ReadEvent();
    }

    /// <summary>The status byte; reading it clears nothing.</summary>
    /// <param name="replyWaits">Whether a reply stands in the output queue (bit 4, MAV).</param>
    public int StatusByte(bool replyWaits)
    {
        int status = (Errors.Count > 0 ? 1 << 2 : 0)
            | (Questionable.Summary ? 1 << 3 : 0)
            | (replyWaits ? 1 << 4 : 0)
            | ((_events & EventEnable) != 0 ? 1 << 5 : 0)
            | (Operation.Summary ? 1 << 7 : 0);
        return status | ((status & ServiceEnable) != 0 ? 1 << 6 : 0);
    }
}
