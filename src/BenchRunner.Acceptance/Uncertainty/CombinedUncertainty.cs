namespace BenchRunner.Acceptance.Uncertainty;

/// <summary>Uncertainty of a value, combined from a budget per JCGM 100.</summary>
/// <param name="Standard">Combined standard uncertainty, unit of the value.</param>
/// <param name="DegreesOfFreedom">Effective degrees of freedom; infinity is possible.</param>
/// <param name="CoverageFactor">Coverage factor k.</param>
public readonly record struct CombinedUncertainty(double Standard, double DegreesOfFreedom, double CoverageFactor)
{
    /// <summary>Expanded uncertainty U = k u, unit of the value.</summary>
    public double Expanded => CoverageFactor * Standard;

    /// <summary>Combines the entries of a budget whose inputs are independent.</summary>
    /// <param name="entries">The entries; none: no uncertainty.</param>
    /// <param name="coverage">Coverage probability, 1; above 0 and below 1.</param>
    /// <returns>u² = Σ (c u)²; ν = u⁴ / Σ ((c u)⁴/ν) (Welch-Satterthwaite), at least 1; k from Student's t at
    /// ν.</returns>
    /// <exception cref="ArgumentOutOfRangeException">Coverage not between 0 and 1.</exception>
    /// <remarks>JCGM 100:2008, equations 10 and G.2b.</remarks>
    /// <example>The end gauge of JCGM 100, H.1: 25, 9.7, 2.9 and 16.6 nm give 32 nm, ν 16.7, and at 99 % U = 93
    /// nm.</example>
    public static CombinedUncertainty Of(IReadOnlyList<UncertaintyEntry> entries, double coverage)
    {
        ArgumentNullException.ThrowIfNull(entries);
        double variance = 0;
        foreach (UncertaintyEntry entry in entries)
        {
            variance += entry.Contribution * entry.Contribution;
        }

        double standard = Math.Sqrt(variance);

        // Shares of the variance rather than fourth powers: a charge of nC to the fourth leaves the range of a double.
        double reciprocal = 0;
        foreach (UncertaintyEntry entry in entries)
        {
            double share = standard > 0 ? entry.Contribution / standard : 0;
            reciprocal += share * share * share * share / entry.DegreesOfFreedom;
        }

        double freedom = reciprocal > 0 ? Math.Max(1, 1 / reciprocal) : double.PositiveInfinity;
        return new CombinedUncertainty(standard, freedom, StudentT.Factor(coverage, freedom));
    }
}
