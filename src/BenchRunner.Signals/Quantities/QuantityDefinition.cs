using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Quantities;

/// <summary>One rule that forms a quantity.</summary>
/// <param name="Id">ID without a route, e.g. <c>qrr/chord-90-25</c>; it travels with each value and each limit.</param>
/// <param name="Rule">The rule in words.</param>
/// <param name="Channels">Channels that must be measured, named as if the low switch fired.</param>
/// <param name="HasRoutes">Whether it rests on the diode's current: measured as <c>id_high</c> (no suffix), or the
/// switch's current less the load's (suffix <c>@id_low-iL</c>). The channels then are those of the first route.</param>
public sealed record QuantityDefinition(
    string Id, string Rule, IReadOnlyList<Channel> Channels, bool HasRoutes = false);
