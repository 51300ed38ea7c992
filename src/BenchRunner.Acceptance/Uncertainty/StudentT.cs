using MathNet.Numerics.Distributions;

namespace BenchRunner.Acceptance.Uncertainty;

/// <summary>Coverage factors from Student's t.</summary>
public static class StudentT
{
    /// <summary>Coverage factor k of a two-sided interval.</summary>
    /// <param name="coverage">Coverage probability, 1; above 0 and below 1.</param>
    /// <param name="degreesOfFreedom">Degrees of freedom; at least 1, infinity for the normal distribution.</param>
    /// <returns>k, 1. Degrees of freedom are cut to a whole number first (JCGM 100, G.4.1): never too small a
    /// factor.</returns>
    /// <exception cref="ArgumentOutOfRangeException">Coverage not between 0 and 1, or degrees of freedom below
    /// 1.</exception>
    /// <example>99 % at 16.7 degrees of freedom: 2.92 (JCGM 100, H.1.6).</example>
    public static double Factor(double coverage, double degreesOfFreedom)
    {
        if (!(coverage > 0 && coverage < 1))
        {
            throw new ArgumentOutOfRangeException(nameof(coverage), coverage, "must lie between 0 and 1");
        }

        if (!(degreesOfFreedom >= 1))
        {
            throw new ArgumentOutOfRangeException(nameof(degreesOfFreedom), degreesOfFreedom, "must be at least 1");
        }

        double probability = (1 + coverage) / 2;
        return double.IsPositiveInfinity(degreesOfFreedom)
            ? Normal.InvCDF(0, 1, probability)
            : MathNet.Numerics.Distributions.StudentT.InvCDF(0, 1, Math.Floor(degreesOfFreedom), probability);
    }
}
