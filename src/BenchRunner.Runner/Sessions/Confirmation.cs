namespace BenchRunner.Runner.Sessions;

/// <summary>A closing that was confirmed.</summary>
/// <param name="By">Who confirmed it, e.g. <c>simulated</c>.</param>
/// <param name="Asked">Whether a person was asked at this closing, and so has read what must be done first.</param>
public sealed record Confirmation(string By, bool Asked);
