namespace BenchRunner.Instruments.Links;

/// <summary>Opens links.</summary>
public static class Link
{
    /// <summary>Opens one link, once; nothing is sent.</summary>
    /// <param name="address">Where the instrument is.</param>
    /// <param name="connectWithin">How long connecting may take.</param>
    /// <param name="writeWithin">How long a write may take.</param>
    /// <param name="time">The clock of the deadline.</param>
    /// <param name="cancel">Ends the attempt.</param>
    /// <exception cref="LinkException">Refused, unknown or silent within the deadline.</exception>
    public static async Task<ILink> Open(
        LinkAddress address,
        TimeSpan connectWithin,
        TimeSpan writeWithin,
        TimeProvider time,
        CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(address);
        return address.Kind switch
        {
            LinkKind.Tcp => await TcpLink.Open(address, connectWithin, writeWithin, time, cancel),
            LinkKind.Serial => SerialLink.Open(address, writeWithin),
            _ => throw new ArgumentOutOfRangeException(nameof(address)),
        };
    }
}
