namespace BenchRunner.Signals.Ringing;

/// <summary>Standard uncertainties of what a ring fit found, in noise of the residuals' colour.</summary>
/// <remarks>
/// Near the fit each unknown is a weighted sum of the samples, its weights h = J (JᵀJ)⁻¹ g with g the unknown's
/// direction. Its variance is σ² hᵀh in white noise, and hᵀ Ω h in noise of covariance Ω, which the autoregression of
/// the residuals gives (<see cref="RingFitNoise"/>).
/// </remarks>
internal readonly ref struct RingFitSpread
{
    private readonly RingFitSolver _fit;
    private readonly ReadOnlySpan<double> _inverse;
    private readonly RingFitNoise _noise;
    private readonly double _variance;
    private readonly Span<double> _weights;

    /// <summary>Makes the uncertainties of a fit.</summary>
    /// <param name="fit">The solved fit.</param>
    /// <param name="inverse">(JᵀJ)⁻¹ for c, d, p and q a mode, s and w a mode.</param>
    /// <param name="noise">The residuals' colour.</param>
    /// <param name="variance">The residuals' variance.</param>
    /// <param name="scratch">One value a sample, overwritten.</param>
    public RingFitSpread(
        RingFitSolver fit, ReadOnlySpan<double> inverse, RingFitNoise noise, double variance, Span<double> scratch)
    {
        _fit = fit;
        _inverse = inverse;
        _noise = noise;
        _variance = variance;
        _weights = scratch;
    }

    /// <summary>Standard uncertainty of a combination of two neighbouring unknowns.</summary>
    /// <param name="at">The first of the two.</param>
    /// <param name="first">What counts of it.</param>
    /// <param name="second">What counts of the other.</param>
    public double Of(int at, double first, double second)
    {
        int modes = _fit.Shape.Length / 2, size = RingFitColumns.Samples(modes), linear = RingFitColumns.Linear(modes);
        Span<double> along = stackalloc double[size];
        for (int i = 0; i < size; i++)
        {
            along[i] = (first * _inverse[(at * size) + i]) + (second * _inverse[((at + 1) * size) + i]);
        }

        if (_noise.IsWhite)
        {
            return Math.Sqrt(Math.Max(0, _variance * ((first * along[at]) + (second * along[at + 1]))));
        }

        // From s and w of each mode to its columns t e cos and t e sin.
        for (int k = 0; k < modes; k++)
        {
            double p = _fit.Linear[2 + (2 * k)], q = _fit.Linear[3 + (2 * k)];
            ref double s = ref along[linear + (2 * k)], w = ref along[linear + (2 * k) + 1];
            (s, w) = ((q * w) - (p * s), -(q * s) - (p * w));
        }

        RingFitColumns.Combine(_fit.Shape, along, _weights);
        return Math.Sqrt(_variance * _noise.Power(_weights));
    }
}
