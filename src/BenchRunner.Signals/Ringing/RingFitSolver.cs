using BenchRunner.Signals.Fitting;

namespace BenchRunner.Signals.Ringing;

/// <summary>Least squares of a ring of a given order: decays and frequencies searched, the rest eliminated.</summary>
internal sealed class RingFitSolver
{
    private readonly int _samples;
    private readonly RingFitSystem _system;
    private readonly LevenbergMarquardt _search;

    /// <summary>Makes a solver.</summary>
    /// <param name="y">Samples; not copied.</param>
    /// <param name="modes">Modes, 1 to 3.</param>
    public RingFitSolver(ReadOnlyMemory<double> y, int modes)
    {
        _samples = y.Length;
        _system = new RingFitSystem(y, modes);
        _search = new LevenbergMarquardt(_system);
    }

    /// <summary>s and w of each mode: σ and ω times the window.</summary>
    public ReadOnlySpan<double> Shape => _search.Unknowns;

    /// <summary>c, d (a window), then p and q of each mode: p cos + q sin.</summary>
    public ReadOnlySpan<double> Linear => _system.Linear;

    /// <summary>Sum of squared residuals, as the products give it.</summary>
    public double Squares => _system.Squares;

    /// <summary>Whether a mode turned out to be a bare decay, not an oscillation.</summary>
    public bool IsBareDecay(int mode) => _system.Bare[mode];

    /// <summary>The inverse of JᵀJ at the fit; see <see cref="RingFitSystem.Covariance"/>.</summary>
    public bool Covariance(Span<double> inverse) => _system.Covariance(inverse);

    /// <summary>Fits.</summary>
    /// <param name="decay">Start of σ a sample, one a mode.</param>
    /// <param name="turn">Start of ω a sample, one a mode; 0 for a bare decay.</param>
    /// <param name="target">Sum of squares that must be reached: a search that will not is given up.</param>
    /// <param name="tolerance">Relative change of frequencies and decays at which the search ends.</param>
    /// <param name="enough">Part of the sum of squares that is not worth a further step.</param>
    /// <returns>Whether the search ended within its tolerance, below the target.</returns>
    public bool Fit(
        ReadOnlySpan<double> decay,
        ReadOnlySpan<double> turn,
        double target,
        double tolerance = LevenbergMarquardt.Tolerance,
        double enough = 0)
    {
        Span<double> start = stackalloc double[_system.Unknowns];
        for (int k = 0; k < _system.Bare.Length; k++)
        {
            start[2 * k] = decay[k] * _samples;
            start[(2 * k) + 1] = turn[k] * _samples;
            _system.Bare[k] = turn[k] == 0;
        }

        return _search.Start(start) && _search.Search(tolerance, target, enough);
    }

    /// <summary>Carries a rough fit on to the full tolerance.</summary>
    /// <returns>Whether the search ended within its tolerance.</returns>
    public bool Refine() => _search.Search();
}
