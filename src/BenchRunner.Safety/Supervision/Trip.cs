namespace BenchRunner.Safety.Supervision;

/// <summary>Why safety ended the work. A trip is for good: only a person clears it.</summary>
/// <param name="Reason">What was seen.</param>
/// <param name="At">When, UTC.</param>
/// <param name="Energised">Whether the bus may have been at or above 60 V DC: only then a latch is left.</param>
public sealed record Trip(string Reason, DateTimeOffset At, bool Energised);
