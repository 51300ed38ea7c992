namespace BenchRunner.Acceptance.Tests.Physics;

/// <summary>What a point's loop did with one capture: everything by which the next one is chosen.</summary>
/// <param name="Number">The how many-th it was, from 1.</param>
/// <param name="IsKept">Whether it is valid.</param>
/// <param name="FirstPulse">Width of the first pulse that was set for it, s.</param>
/// <param name="Findings">Criteria that found something, in their order.</param>
internal sealed record TakenCapture(int Number, bool IsKept, double FirstPulse, string Findings);
