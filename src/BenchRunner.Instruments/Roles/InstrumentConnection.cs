using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Instruments.Roles;

/// <summary>What connecting to any instrument needs.</summary>
/// <param name="Address">Where it is.</param>
/// <param name="Dialect">Its commands.</param>
/// <param name="Options">Bounds of the session.</param>
/// <param name="Time">The clock of all deadlines.</param>
/// <param name="Log">Takes what happens on the way.</param>
public sealed record InstrumentConnection(
    LinkAddress Address, Dialect Dialect, SessionOptions Options, TimeProvider Time, IInstrumentLog Log)
{
    /// <summary>Opens its links.</summary>
    public LinkOpener Opener { get; init; } = Wire;

    /// <summary>Opens a link over the wire, within the bounds of the options.</summary>
    public static Task<ILink> Wire(
        LinkAddress address, SessionOptions options, TimeProvider time, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(options);
        return Link.Open(address, options, time, cancel);
    }
}
