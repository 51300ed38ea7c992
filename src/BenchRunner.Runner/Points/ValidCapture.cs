using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Points;

/// <summary>A valid capture with what the analysis made of it.</summary>
/// <param name="Number">Its number at the operating point, from 1.</param>
/// <param name="Traces">Its traces as recorded.</param>
/// <param name="Result">Facts and quantities.</param>
public sealed record ValidCapture(int Number, IReadOnlyList<RawTrace> Traces, AnalysisResult Result);
