namespace FakeBench.Scpi;

/// <summary>One unit of a program message.</summary>
/// <param name="Header">The header from the root, as written, e.g. <c>SOUR:VOLT</c> or <c>*IDN?</c>.</param>
/// <param name="Data">Its data.</param>
public sealed record ProgramUnit(string Header, IReadOnlyList<ProgramData> Data);
