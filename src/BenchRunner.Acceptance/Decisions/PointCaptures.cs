using BenchRunner.Acceptance.Uncertainty;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Decisions;

/// <summary>What one operating point gave: the analyses of its valid captures, and the bench's budget.</summary>
/// <param name="OperatingPoint">Name of the operating point.</param>
/// <param name="Taken">Captures taken, valid or not.</param>
/// <param name="Valid">Analyses of the valid captures, in the order in which they were taken.</param>
/// <param name="Budget">Budget formed on the first valid capture; null where there is none.</param>
/// <remarks>All of it can be formed again from stored captures: rescoring decides by the same function.</remarks>
public sealed record PointCaptures(
    string OperatingPoint, int Taken, IReadOnlyList<AnalysisResult> Valid, BenchBudget? Budget);
