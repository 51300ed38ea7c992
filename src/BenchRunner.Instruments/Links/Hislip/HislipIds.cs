namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>The identifiers of a client's messages, and whether a whole reply was handed up since the last one that said
/// so (IVI-6.1, 3.1).</summary>
/// <remarks>Pure counting; the caller keeps its threads apart.</remarks>
public sealed class HislipIds
{
    /// <summary>The first identifier, at the start and after a device clear.</summary>
    public const uint First = 0xffff_ff00;

    /// <summary>Stands for the last identifier where nothing was sent yet.</summary>
    public const uint None = First - (uint)Step;

    /// <summary>Stands in a part that is not the last one for no identifier.</summary>
    public const uint Unmarked = 0xffff_ffff;

    private const int Step = 2;

    private bool _delivered;
    private uint _lastDelivered = None;

    /// <summary>Identifier of the last message sent, <see cref="None"/> where there is none.</summary>
    public uint Last { get; private set; } = None;

    /// <summary>The identifier of the next message; wraps to 0.</summary>
    public uint Next() => Last = unchecked(Last + (uint)Step);

    /// <summary>Notes that a whole reply was handed up.</summary>
    /// <param name="id">The identifier that it bore.</param>
    public void Delivered(uint id) => (_delivered, _lastDelivered) = (true, id);

    /// <summary>Whether an interruption made a reply void that was not handed up: where a message lies between the last
    /// one answered and the one that interrupted.</summary>
    /// <param name="id">Identifier of the message that interrupted.</param>
    public bool IsVoidedBy(uint id) => unchecked((int)(id - _lastDelivered)) > Step;

    /// <summary>The control code of the next message: bit 0 once after a whole reply was handed up
    /// (RMT-delivered).</summary>
    public byte TakeControl()
    {
        var control = (byte)(_delivered ? 1 : 0);
        _delivered = false;
        return control;
    }

    /// <summary>Starts anew: the device was cleared.</summary>
    public void Restart() => (Last, _delivered, _lastDelivered) = (None, false, None);
}
