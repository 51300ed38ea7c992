namespace FakeBench.Scpi;

/// <summary>One command or query of an instrument.</summary>
/// <param name="Pattern">Its header.</param>
/// <param name="Fewest">Fewest parameters.</param>
/// <param name="Most">Most parameters.</param>
/// <param name="Run">What it does.</param>
public sealed record Command(HeaderPattern Pattern, int Fewest, int Most, Action<Call, Reply> Run);
