namespace BenchRunner.Evidence.Captures;

/// <summary>Where a capture of a device is to be found, and what its newest verdict says.</summary>
/// <param name="Id">What <see cref="EvidenceReader.ReadTraces"/> names it by; holds within this file alone.</param>
/// <param name="Run">Identity of the run.</param>
/// <param name="StartedAt">When the run began, UTC, ISO 8601.</param>
/// <param name="OperatingPoint">Name of the operating point, or <c>zero</c>, <c>proving-before</c>,
/// <c>proving-after</c>.</param>
/// <param name="Number">Number of the capture at its operating point, as the view <c>captures</c> has it.</param>
/// <param name="Sha256">SHA-256 of its stored traces, lower-case hexadecimal.</param>
/// <param name="Findings">Findings of the newest verdict, a JSON array; null: there is no verdict.</param>
/// <param name="NotEvaluated">Criteria that were not evaluated, a JSON array; null: there is no verdict.</param>
public sealed record FoundCapture(
    long Id,
    string Run,
    string StartedAt,
    string OperatingPoint,
    int Number,
    string Sha256,
    string? Findings,
    string? NotEvaluated);
