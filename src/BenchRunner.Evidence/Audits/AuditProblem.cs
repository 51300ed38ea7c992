namespace BenchRunner.Evidence.Audits;

/// <summary>Something in an evidence file that is not as it was stored.</summary>
/// <param name="Run">The run it belongs to; null: the file.</param>
/// <param name="What">A stable word: <c>database</c>, <c>schema</c>, <c>file</c>, <c>seal</c>, <c>chain</c>,
/// <c>unfinished</c>, <c>unsealed</c>, <c>payload</c>, <c>trace</c>.</param>
/// <param name="Message">What was found, in words.</param>
public sealed record AuditProblem(string? Run, string What, string Message);
