namespace BenchRunner.Runner.Checks;

/// <summary>One thing that a check of the bench found.</summary>
/// <param name="MakesUnfit">Whether no run should begin with it; else it is worth knowing.</param>
/// <param name="Message">What was found, what was expected, what to do.</param>
public sealed record CheckFinding(bool MakesUnfit, string Message);
