namespace BenchRunner.Evidence.Stores;

/// <summary>A run that had no end when the file was opened, and was closed as <c>stopped</c>.</summary>
/// <param name="Run">Its identity.</param>
/// <param name="Device">Serial of its device.</param>
/// <param name="StartedAt">When it began, UTC ISO 8601.</param>
/// <param name="Captures">Captures that it holds, all kinds.</param>
public sealed record ClosedRun(string Run, string Device, string StartedAt, int Captures);
