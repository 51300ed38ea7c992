namespace BenchRunner.Signals.Fitting;

/// <summary>Nonlinear least squares by the method of Levenberg and Marquardt.</summary>
/// <remarks>
/// Each step solves (JᵀJ + λ diag JᵀJ) δ = Jᵀr (Marquardt 1963). λ follows what a step kept of the reduction that it
/// promised, in the manner of Nielsen 1999 (both from memory), and is 0 near the end, where the plain step of Gauss and
/// Newton converges fastest. Plain ordered loops: the same problem gives the same bits.
/// </remarks>
public sealed class LevenbergMarquardt
{
    /// <summary>Relative change of the unknowns at which a search ends unless told otherwise.</summary>
    public const double Tolerance = 1e-12;

    private const int MostSteps = 200;
    private const double FirstDamping = 1e-4;
    private const double LeastDamping = 1e-7;
    private const double MostDamping = 1e10;
    private const double Growth = 4;
    private const double Relief = 1 / 3.0;

    /// <summary>Where rounding stops smaller steps, a relative change below this still counts as the end.</summary>
    private const double RoundingTolerance = 1e-9;

    /// <summary>Steps granted before a search that promises nothing is given up.</summary>
    private const int StepsGranted = 3;

    /// <summary>How many times the reduction that a step promises is hoped for from all steps to come.</summary>
    private const double Hope = 10;

    private readonly NormalEquations _problem;
    private readonly double[] _unknowns;
    private readonly double[] _trial;
    private readonly double[] _damped;
    private readonly double[] _step;

    /// <summary>Makes a search of a problem.</summary>
    /// <param name="problem">The problem; at the end it stands evaluated at the answer.</param>
    public LevenbergMarquardt(NormalEquations problem)
    {
        ArgumentNullException.ThrowIfNull(problem);
        _problem = problem;
        _unknowns = new double[problem.Unknowns];
        _trial = new double[problem.Unknowns];
        _step = new double[problem.Unknowns];
        _damped = new double[problem.Unknowns * problem.Unknowns];
    }

    /// <summary>The unknowns at the best point so far.</summary>
    public ReadOnlySpan<double> Unknowns => _unknowns;

    /// <summary>Begins at a point.</summary>
    /// <param name="start">One value an unknown.</param>
    /// <returns>False where the problem does not admit it or cannot be evaluated there.</returns>
    /// <exception cref="ArgumentException">Fewer or more values than unknowns.</exception>
    public bool Start(ReadOnlySpan<double> start)
    {
        if (start.Length != _unknowns.Length)
        {
            throw new ArgumentException($"{_unknowns.Length} values wanted, {start.Length} given.", nameof(start));
        }

        start.CopyTo(_unknowns);
        return _problem.Admit(_unknowns) && _problem.Evaluate(_unknowns);
    }

    /// <summary>Searches on from where the last search ended, or from the start.</summary>
    /// <param name="tolerance">Relative change of all unknowns at which the search ends.</param>
    /// <param name="target">Sum of squares that must be reached: a search that will not is given up.</param>
    /// <param name="enough">Part of the sum of squares: the search also ends where a nearly plain step promises no larger
    /// reduction.</param>
    /// <returns>Whether the search ended within its tolerance, below the target. False also where 200 steps do not
    /// suffice or no step improves.</returns>
    public bool Search(double tolerance = Tolerance, double target = double.PositiveInfinity, double enough = 0)
    {
        double damping = FirstDamping, growth = Growth, lastFine = double.PositiveInfinity;
        for (int step = 0; step < MostSteps; step++)
        {
            double expected = Step(damping);
            if (double.IsNaN(expected))
            {
                damping = Math.Max(FirstDamping, damping * growth);
                continue;
            }

            if (step >= StepsGranted && _problem.Squares - (Hope * expected) > target)
            {
                return false;
            }

            if (expected < enough * _problem.Squares && damping <= FirstDamping)
            {
                return _problem.Squares < target;
            }

            double change = Try();
            // Nearer to the end the sum of squares no longer tells better from worse; the plain step still converges.
            double before = _problem.Squares, hidden = _problem.Rounding;
            bool fine = expected < hidden;
            bool better = _problem.Admit(_trial) && _problem.Evaluate(_trial)
                && _problem.Squares <= before + (fine ? hidden : 0);
            if (!better)
            {
                damping = Math.Max(LeastDamping, damping * growth);
                growth *= 2;
                _problem.Withdraw();
                if (damping > MostDamping || !_problem.Evaluate(_unknowns))
                {
                    return false;
                }

                continue;
            }

            _trial.CopyTo(_unknowns, 0);
            if (change <= tolerance || (fine && change <= RoundingTolerance && change > lastFine / 2))
            {
                return _problem.Squares < target;
            }

            lastFine = fine ? change : lastFine;
            // What the step kept of its promise says how far the equations can be trusted.
            double kept = (2 * (before - _problem.Squares) / expected) - 1;
            double relief = fine ? Relief : Math.Max(Relief, 1 - (kept * kept * kept));
            damping = damping < LeastDamping ? 0 : damping * relief;
            growth = Growth;
        }

        return false;
    }

    /// <summary>Solves for the step; returns the reduction it promises, NaN without positive curvature.</summary>
    private double Step(double damping)
    {
        int count = _step.Length;
        _problem.Curvature.CopyTo(_damped);
        _problem.Gradient.CopyTo(_step);
        for (int i = 0; i < count; i++)
        {
            _damped[(i * count) + i] *= 1 + damping;
            if (_problem.IsHeld(i))
            {
                Cholesky.Hold(_damped, count, i);
                _step[i] = 0;
            }
        }

        if (!Cholesky.Factor(_damped, count))
        {
            return double.NaN;
        }

        Cholesky.Forward(_damped, count, _step);
        Cholesky.Backward(_damped, count, _step);
        double expected = 0;
        for (int i = 0; i < count; i++)
        {
            expected += _step[i] * _problem.Gradient[i];
        }

        return expected;
    }

    /// <summary>Places the trial; returns its largest relative change.</summary>
    private double Try()
    {
        double change = 0;
        for (int i = 0; i < _step.Length; i++)
        {
            _trial[i] = _unknowns[i] + _step[i];
            change = Math.Max(change, Math.Abs(_step[i]) / _problem.Size(_unknowns, i));
        }

        return change;
    }
}
