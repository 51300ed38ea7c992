using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Analysis;

/// <summary>What one waveform says: facts about its pulse train, and quantities.</summary>
/// <param name="Train">Facts that validity rests on.</param>
/// <param name="Quantities">One entry a (quantity, definition), in the catalogue's order.</param>
public sealed record AnalysisResult(TrainFacts Train, IReadOnlyList<QuantityValue> Quantities);
