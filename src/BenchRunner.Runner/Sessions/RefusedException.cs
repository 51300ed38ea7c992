namespace BenchRunner.Runner.Sessions;

/// <summary>The session was refused before anything was energised.</summary>
/// <param name="kind">Which of the documented refusals.</param>
/// <param name="message">Why, and what to do.</param>
public sealed class RefusedException(RefusalKind kind, string message) : Exception(message)
{
    /// <summary>Which of the documented refusals.</summary>
    public RefusalKind Kind { get; } = kind;
}
