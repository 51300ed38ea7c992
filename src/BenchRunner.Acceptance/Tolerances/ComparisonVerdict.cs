using BenchRunner.Signals.Comparisons;

namespace BenchRunner.Acceptance.Tolerances;

/// <summary>A comparison held against a tolerance file.</summary>
/// <param name="Limited">Each quantity that the file names, in its order.</param>
public sealed record ComparisonVerdict(IReadOnlyList<JudgedScalar> Limited)
{
    /// <summary>Whether every one is inside; nothing judged is not inside.</summary>
    public bool IsInside => Limited.Count > 0 && Limited.All(one => one.IsInside);

    /// <summary>Those that are not.</summary>
    public IEnumerable<JudgedScalar> Outside => Limited.Where(one => !one.IsInside);

    /// <summary>The quantities that a comparison must hold to be judged.</summary>
    /// <param name="tolerances">The tolerance file.</param>
    public static IReadOnlyList<ScalarName> Wanted(ToleranceSet tolerances)
    {
        ArgumentNullException.ThrowIfNull(tolerances);
        return [.. tolerances.Limits.Select(limit => new ScalarName(limit.Quantity, limit.Definition))];
    }

    /// <summary>Judges a comparison that was made with <see cref="Wanted"/>.</summary>
    /// <param name="comparison">The comparison.</param>
    /// <param name="tolerances">The tolerance file.</param>
    /// <exception cref="ArgumentException">The comparison was made for another file.</exception>
    public static ComparisonVerdict Judge(ComparisonResult comparison, ToleranceSet tolerances)
    {
        ArgumentNullException.ThrowIfNull(comparison);
        ArgumentNullException.ThrowIfNull(tolerances);
        return comparison.Named.Select(one => one.Quantity).SequenceEqual(tolerances.Limits.Select(one => one.Quantity))
            ? new ComparisonVerdict(
                [.. comparison.Named.Zip(tolerances.Limits, (scalar, limit) => new JudgedScalar(scalar, limit.Within))])
            : throw new ArgumentException("The comparison was made for other tolerances.", nameof(comparison));
    }
}
