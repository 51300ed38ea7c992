namespace BenchRunner.Safety.SafeStates;

/// <summary>What bringing the bench to the safe state gave.</summary>
/// <param name="Proved">Whether the voltmeter proved the bus below 60 V DC.</param>
/// <param name="Voltage">Its last reading, V; null where there was none.</param>
/// <param name="At">Time of that reading, UTC.</param>
/// <param name="Doubts">What did not answer or does not fit, a line each; unknown counts as energised.</param>
public sealed record SafeStateReport(bool Proved, double? Voltage, DateTimeOffset? At, IReadOnlyList<string> Doubts);
