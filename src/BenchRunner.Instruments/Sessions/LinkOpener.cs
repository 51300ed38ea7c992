using BenchRunner.Instruments.Links;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Opens one link, once: over the wire by default (<see cref="Link.Open"/>), to instruments in memory where
/// time is simulated.</summary>
/// <param name="address">Where the instrument is.</param>
/// <param name="options">Bounds of connecting and writing.</param>
/// <param name="time">The clock of the deadlines.</param>
/// <param name="cancel">Ends the attempt.</param>
/// <exception cref="LinkException">Refused, unknown or silent within the deadline.</exception>
public delegate Task<ILink> LinkOpener(
    LinkAddress address, SessionOptions options, TimeProvider time, CancellationToken cancel);
