namespace BenchRunner.Safety.SafeStates;

/// <summary>What bringing the bench to the safe state gave.</summary>
/// <param name="Proved">Whether the voltmeter proved the bus down.</param>
/// <param name="Voltage">Its last reading, V; null where there was none.</param>
/// <param name="At">Time of that reading, UTC.</param>
/// <param name="EnergyAtMost">Energy that the bank may hold, J: by the last reading where the bus is proved down, else by
/// the highest voltage that was commanded or seen since the proof before.</param>
/// <param name="Doubts">What did not answer or does not fit, a line each; unknown counts as energised.</param>
public sealed record SafeStateReport(
    bool Proved, double? Voltage, DateTimeOffset? At, double EnergyAtMost, IReadOnlyList<string> Doubts);
