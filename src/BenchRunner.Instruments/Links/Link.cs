using BenchRunner.Instruments.Links.Hislip;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Instruments.Links;

/// <summary>Opens links.</summary>
public static class Link
{
    /// <summary>Opens one link, once; no program message is sent.</summary>
    /// <param name="address">Where the instrument is.</param>
    /// <param name="options">How long connecting and a write may take; the lock to take.</param>
    /// <param name="time">The clock of the deadline.</param>
    /// <param name="cancel">Ends the attempt.</param>
    /// <exception cref="LinkException">Refused, unknown or silent within the deadline, or locked by another
    /// controller.</exception>
    public static async Task<ILink> Open(
        LinkAddress address, SessionOptions options, TimeProvider time, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(address);
        ArgumentNullException.ThrowIfNull(options);
        var (connectWithin, writeWithin) = (options.ConnectWithin, options.WriteWithin);
        return address.Kind switch
        {
            LinkKind.Tcp => await TcpLink.Open(address, connectWithin, writeWithin, time, cancel),
            LinkKind.Serial => SerialLink.Open(address, writeWithin),
            LinkKind.Hislip => await HislipOpening.Open(address, options, time, cancel),
            _ => throw new ArgumentOutOfRangeException(nameof(address)),
        };
    }
}
