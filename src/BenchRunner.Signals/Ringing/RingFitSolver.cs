namespace BenchRunner.Signals.Ringing;

/// <summary>Least squares of a ring of a given order: Levenberg-Marquardt on decays and frequencies alone.</summary>
/// <remarks>
/// The linear unknowns are eliminated at every step (variable projection; Golub and Pereyra 1973, in the simplification
/// of Kaufman 1975, from memory), so that only two unknowns a mode are searched and a poor start of amplitudes cannot
/// mislead. Everything rests on <see cref="RingFitColumns"/>: one pass over the samples a step.
/// </remarks>
internal sealed class RingFitSolver
{
    private const int MostSteps = 200;

    /// <summary>Relative change of frequencies and decays at which the search ends.</summary>
    private const double Tolerance = 1e-12;

    /// <summary>Where rounding stops smaller steps, a relative change below this still counts as the end.</summary>
    private const double RoundingTolerance = 1e-9;

    /// <summary>Reductions below this part of the sum of squares cannot be told from rounding.</summary>
    private const double Resolution = 1e-12;

    /// <summary>
    /// The slowest turn, rad over the window. A mode that would turn slower is a bare decay: from there on its sine is
    /// left out, without which amplitudes and decay could not be told apart.
    /// </summary>
    private const double SlowestTurn = 0.1;

    /// <summary>Steps granted before a search that promises nothing is given up.</summary>
    private const int StepsGranted = 3;

    /// <summary>How many times the reduction that a step promises is hoped for from all steps to come.</summary>
    private const double Hope = 10;

    private readonly int _modes;
    private readonly RingFitSystem _system;
    private readonly double[] _shape;
    private readonly double[] _trial;
    private readonly bool[] _before;
    private readonly double[] _damped;
    private readonly double[] _step;

    /// <summary>Makes a solver for a number of modes.</summary>
    public RingFitSolver(int modes)
    {
        _modes = modes;
        int shape = 2 * modes;
        _system = new RingFitSystem(modes);
        _shape = new double[shape];
        _trial = new double[shape];
        _before = new bool[modes];
        _damped = new double[shape * shape];
        _step = new double[shape];
    }

    /// <summary>s and w of each mode: σ and ω times the window.</summary>
    public ReadOnlySpan<double> Shape => _shape;

    /// <summary>c, d (a window), then p and q of each mode: p cos + q sin.</summary>
    public ReadOnlySpan<double> Linear => _system.Linear;

    /// <summary>Sum of squared residuals, as the products give it.</summary>
    public double Squares => _system.Squares;

    /// <summary>Whether a mode turned out to be a bare decay, not an oscillation.</summary>
    public bool IsBareDecay(int mode) => _system.Bare[mode];

    /// <summary>The inverse of JᵀJ at the fit; see <see cref="RingFitSystem.Covariance"/>.</summary>
    public bool Covariance(Span<double> inverse) => _system.Covariance(inverse);

    /// <summary>Fits.</summary>
    /// <param name="y">Samples.</param>
    /// <param name="decay">Start of σ a sample, one a mode.</param>
    /// <param name="turn">Start of ω a sample, one a mode; 0 for a bare decay.</param>
    /// <param name="target">Sum of squares that must be reached: a search that will not is given up.</param>
    /// <param name="tolerance">Relative change of frequencies and decays at which the search ends.</param>
    /// <returns>Whether the search ended within its tolerance, below the target.</returns>
    public bool Fit(
        ReadOnlySpan<double> y,
        ReadOnlySpan<double> decay,
        ReadOnlySpan<double> turn,
        double target,
        double tolerance = Tolerance)
    {
        for (int k = 0; k < _modes; k++)
        {
            _shape[2 * k] = decay[k] * y.Length;
            _shape[(2 * k) + 1] = turn[k] * y.Length;
            _system.Bare[k] = turn[k] == 0;
        }

        return IsAllowed(_shape, y.Length) && _system.Evaluate(y, _shape) && Search(y, target, tolerance);
    }

    /// <summary>Carries a rough fit on to the full tolerance.</summary>
    /// <param name="y">The same samples.</param>
    /// <returns>Whether the search ended within its tolerance.</returns>
    public bool Refine(ReadOnlySpan<double> y) => Search(y, double.PositiveInfinity, Tolerance);

    private bool Search(ReadOnlySpan<double> y, double target, double tolerance)
    {
        double whole = _system.Whole;
        double damping = 1e-4, lastFine = double.PositiveInfinity;
        for (int step = 0; step < MostSteps; step++)
        {
            double expected = Step(damping);
            if (double.IsNaN(expected))
            {
                damping = Math.Max(1e-4, damping * 10);
                continue;
            }

            if (step >= StepsGranted && Squares - (Hope * expected) > target)
            {
                return false;
            }

            double change = Try();
            // Nearer to the end the sum of squares no longer tells better from worse; the plain step still converges.
            bool fine = expected < Resolution * whole;
            double before = Squares;
            Slow();
            bool better = IsAllowed(_trial, y.Length) && _system.Evaluate(y, _trial) && (fine || Squares <= before);
            if (!better)
            {
                damping = Math.Max(1e-4, damping * 10);
                _before.CopyTo(_system.Bare, 0);
                if (damping > 1e10 || !_system.Evaluate(y, _shape))
                {
                    return false;
                }

                continue;
            }

            _trial.CopyTo(_shape, 0);
            damping = damping < 1e-7 ? 0 : damping / 30;
            if (change <= tolerance || (fine && change <= RoundingTolerance && change > lastFine / 2))
            {
                return Squares < target;
            }

            lastFine = fine ? change : lastFine;
        }

        return false;
    }

    private bool IsAllowed(ReadOnlySpan<double> shape, int samples)
    {
        for (int k = 0; k < shape.Length; k += 2)
        {
            // Growing by e⁵ over the window, or gone within half a sample, is no ring; neither is beyond Nyquist.
            bool allowed = shape[k] > -5 && shape[k] < 2.0 * samples
                && (_system.Bare[k / 2] || (shape[k + 1] > 0 && shape[k + 1] < Math.PI * samples));
            if (!allowed)
            {
                return false;
            }
        }

        return true;
    }

    /// <summary>Solves for the step; returns the reduction it promises, NaN without positive curvature.</summary>
    private double Step(double damping)
    {
        int count = _shape.Length;
        _system.Curvature.CopyTo(_damped);
        _system.Gradient.CopyTo(_step);
        for (int i = 0; i < count; i++)
        {
            _damped[(i * count) + i] *= 1 + damping;
            if (_system.IsHeld(i))
            {
                RingFitSystem.Hold(_damped, count, i);
                _step[i] = 0;
            }
        }

        if (!RingFitAlgebra.Factor(_damped, count))
        {
            return double.NaN;
        }

        RingFitAlgebra.Forward(_damped, count, _step);
        RingFitAlgebra.Backward(_damped, count, _step);
        double expected = 0;
        for (int i = 0; i < count; i++)
        {
            expected += _step[i] * _system.Gradient[i];
        }

        return expected;
    }

    /// <summary>Makes bare decays of modes that would turn slower than can be told, in the trial.</summary>
    private void Slow()
    {
        _system.Bare.CopyTo(_before, 0);
        for (int k = 0; k < _modes; k++)
        {
            if (!_system.Bare[k] && _trial[(2 * k) + 1] < SlowestTurn)
            {
                _system.Bare[k] = true;
                _trial[(2 * k) + 1] = 0;
            }
        }
    }

    /// <summary>Places the trial; returns its largest change relative to |s| + w of the mode.</summary>
    private double Try()
    {
        double change = 0;
        for (int i = 0; i < _shape.Length; i++)
        {
            _trial[i] = _shape[i] + _step[i];
            double size = Math.Abs(_shape[i & ~1]) + _shape[i | 1];
            change = Math.Max(change, Math.Abs(_step[i]) / size);
        }

        return change;
    }
}
