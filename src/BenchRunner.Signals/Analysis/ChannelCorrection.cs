namespace BenchRunner.Signals.Analysis;

/// <summary>The stated error of a channel, undone before anything is measured: recorded = gain · true + offset, late by
/// skew.</summary>
/// <param name="Gain">Gain, 1; not 0.</param>
/// <param name="Offset">Offset, V or A; null: not stated (for a current the pre-pulse mean is taken).</param>
/// <param name="Skew">Delay of the record, s; positive: recorded late.</param>
public sealed record ChannelCorrection(double Gain = 1, double? Offset = null, double Skew = 0);
