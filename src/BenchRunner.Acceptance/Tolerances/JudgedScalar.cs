using BenchRunner.Signals.Comparisons;

namespace BenchRunner.Acceptance.Tolerances;

/// <summary>One quantity of a comparison, held against its tolerance.</summary>
/// <param name="Scalar">The quantity.</param>
/// <param name="Within">Largest relative error, either way, 1.</param>
public sealed record JudgedScalar(ScalarComparison Scalar, double Within)
{
    /// <summary>Whether it is inside; without an error it is not: what was not evaluated is no pass.</summary>
    public bool IsInside => Scalar.RelativeError is { } error && Math.Abs(error) <= Within;
}
