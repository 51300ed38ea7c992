using BenchRunner.Signals.Traces;

namespace BenchRunner.Instruments.Roles;

/// <summary>What the scope gave for one pulse train.</summary>
/// <param name="Traces">One trace a channel that was asked for, in the order asked; fewer where one could not be
/// read.</param>
/// <param name="Count">The scope's acquisition count, the same before and after reading; null where it changed in
/// between.</param>
public sealed record ScopeRecord(IReadOnlyList<RawTrace> Traces, long? Count);
