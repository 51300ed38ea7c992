namespace BenchRunner.Evidence.Stores;

/// <summary>Why a run may not begin, found before anything is written.</summary>
/// <param name="Kind">The rule.</param>
/// <param name="Message">The rule in words, with what to do.</param>
public sealed record RunRefusal(RunRefusalKind Kind, string Message);
