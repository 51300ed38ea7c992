namespace BenchRunner.Signals.Ringing;

/// <summary>Least squares of a ring of a given order: Levenberg-Marquardt on decays and frequencies alone.</summary>
/// <remarks>
/// The linear unknowns are eliminated at every step (variable projection; Golub and Pereyra 1973, in the simplification
/// of Kaufman 1975, from memory), so that only two unknowns a mode are searched and a poor start of amplitudes cannot
/// mislead. Everything rests on <see cref="RingFitColumns"/>: one pass over the samples a step.
/// </remarks>
internal sealed class RingFitSolver
{
    private const int MostSteps = 60;

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
    private readonly double[] _shape;
    private readonly double[] _trial;
    private readonly bool[] _bare;
    private readonly bool[] _before;
    private readonly double[] _products;
    private readonly double[] _normal;
    private readonly double[] _cross;
    private readonly double[] _curvature;
    private readonly double[] _damped;
    private readonly double[] _gradient;
    private readonly double[] _step;

    /// <summary>Makes a solver for a number of modes.</summary>
    public RingFitSolver(int modes)
    {
        _modes = modes;
        int linear = RingFitColumns.Linear(modes), width = RingFitColumns.Width(modes), shape = 2 * modes;
        _shape = new double[shape];
        _trial = new double[shape];
        _bare = new bool[modes];
        _before = new bool[modes];
        _products = new double[width * width];
        _normal = new double[linear * linear];
        _cross = new double[shape * linear];
        _curvature = new double[shape * shape];
        _damped = new double[shape * shape];
        _gradient = new double[shape];
        _step = new double[shape];
        Linear = new double[linear];
    }

    /// <summary>s and w of each mode: σ and ω times the window.</summary>
    public ReadOnlySpan<double> Shape => _shape;

    /// <summary>c, d (a window), then p and q of each mode: p cos + q sin.</summary>
    public double[] Linear { get; }

    /// <summary>Sum of squared residuals, as the products give it.</summary>
    public double Squares { get; private set; }

    /// <summary>Whether a mode turned out to be a bare decay, not an oscillation.</summary>
    public bool IsBareDecay(int mode) => _bare[mode];

    /// <summary>Fits.</summary>
    /// <param name="y">Samples.</param>
    /// <param name="decay">Start of σ a sample, one a mode.</param>
    /// <param name="turn">Start of ω a sample, one a mode; 0 for a bare decay.</param>
    /// <param name="target">Sum of squares that must be reached: a search that will not is given up.</param>
    /// <returns>Whether the search ended within its tolerance, below the target.</returns>
    public bool Fit(ReadOnlySpan<double> y, ReadOnlySpan<double> decay, ReadOnlySpan<double> turn, double target)
    {
        for (int k = 0; k < _modes; k++)
        {
            _shape[2 * k] = decay[k] * y.Length;
            _shape[(2 * k) + 1] = turn[k] * y.Length;
            _bare[k] = turn[k] == 0;
        }

        if (!IsAllowed(_shape, y.Length) || !Evaluate(y, _shape))
        {
            return false;
        }

        double whole = Product(RingFitColumns.Samples(_modes), RingFitColumns.Samples(_modes));
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
            bool better = IsAllowed(_trial, y.Length) && Evaluate(y, _trial) && (fine || Squares <= before);
            if (!better)
            {
                damping = Math.Max(1e-4, damping * 10);
                _before.CopyTo(_bare, 0);
                if (damping > 1e10 || !Evaluate(y, _shape))
                {
                    return false;
                }

                continue;
            }

            _trial.CopyTo(_shape, 0);
            damping = damping < 1e-7 ? 0 : damping / 30;
            if (change <= Tolerance || (fine && change <= RoundingTolerance && change > lastFine / 2))
            {
                return Squares < target;
            }

            lastFine = fine ? change : lastFine;
        }

        return false;
    }

    /// <summary>The inverse of JᵀJ at the fit, for c, d, p and q a mode, s and w a mode, in this order.</summary>
    /// <param name="inverse">Receives the matrix, (2 + 4 modes)².</param>
    /// <returns>False where the unknowns cannot be told apart.</returns>
    public bool Covariance(Span<double> inverse)
    {
        int linear = RingFitColumns.Linear(_modes), size = linear + (2 * _modes);
        Span<double> factor = stackalloc double[size * size];
        Span<double> scale = stackalloc double[size];
        for (int i = 0; i < size; i++)
        {
            for (int j = 0; j <= i; j++)
            {
                factor[(i * size) + j] = i < linear ? Product(i, j)
                    : j < linear ? Cross(i - linear, j)
                    : Curvature(i - linear, j - linear);
            }

        }

        for (int k = 0; k < _modes; k++)
        {
            if (_bare[k])
            {
                Hold(factor, size, 3 + (2 * k));
                Hold(factor, size, linear + 1 + (2 * k));
            }
        }

        for (int i = 0; i < size; i++)
        {
            scale[i] = 1 / Math.Sqrt(factor[(i * size) + i]);
            for (int j = 0; j <= i; j++)
            {
                factor[(i * size) + j] *= scale[i] * scale[j];
            }
        }

        if (!RingFitAlgebra.Factor(factor, size))
        {
            return false;
        }

        for (int i = 0; i < size; i++)
        {
            Span<double> column = inverse.Slice(i * size, size);
            column.Clear();
            column[i] = 1;
            RingFitAlgebra.Forward(factor, size, column);
            RingFitAlgebra.Backward(factor, size, column);
            for (int j = 0; j < size; j++)
            {
                column[j] *= scale[i] * scale[j];
            }
        }

        return true;
    }

    private bool IsAllowed(ReadOnlySpan<double> shape, int samples)
    {
        for (int k = 0; k < shape.Length; k += 2)
        {
            // Growing by e⁵ over the window, or gone within half a sample, is no ring; neither is beyond Nyquist.
            bool allowed = shape[k] > -5 && shape[k] < 2.0 * samples
                && (_bare[k / 2] || (shape[k + 1] > 0 && shape[k + 1] < Math.PI * samples));
            if (!allowed)
            {
                return false;
            }
        }

        return true;
    }

    /// <summary>Whether an unknown is the turn of a bare decay.</summary>
    private bool IsHeld(int shape) => shape % 2 == 1 && _bare[shape / 2];

    private double Product(int i, int j) =>
        i < j ? _products[(i * RingFitColumns.Width(_modes)) + j] : _products[(j * RingFitColumns.Width(_modes)) + i];

    /// <summary>Derivative columns as combinations of t e cos and t e sin: by s: −p, −q; by w: q, −p.</summary>
    private (int Column, double Cosine, double Sine) Derivative(int shape)
    {
        int k = shape / 2;
        double p = Linear[2 + (2 * k)], q = Linear[3 + (2 * k)];
        int column = RingFitColumns.Linear(_modes) + (2 * k);
        return shape % 2 == 0 ? (column, -p, -q) : (column, q, -p);
    }

    private double Cross(int shape, int column)
    {
        (int at, double cosine, double sine) = Derivative(shape);
        return (cosine * Product(at, column)) + (sine * Product(at + 1, column));
    }

    private double Curvature(int i, int j)
    {
        (int at, double cosine, double sine) = Derivative(j);
        return (cosine * Cross(i, at)) + (sine * Cross(i, at + 1));
    }

    /// <summary>Solves the linear unknowns at a shape, and forms gradient and reduced curvature there.</summary>
    private bool Evaluate(ReadOnlySpan<double> y, ReadOnlySpan<double> shape)
    {
        RingFitColumns.Multiply(y, shape, _products);
        int linear = Linear.Length, samples = RingFitColumns.Samples(_modes);
        for (int i = 0; i < linear; i++)
        {
            for (int j = 0; j <= i; j++)
            {
                _normal[(i * linear) + j] = Product(j, i);
            }

            Linear[i] = Product(i, samples);
        }

        for (int k = 0; k < _modes; k++)
        {
            if (_bare[k])
            {
                Hold(_normal, linear, 3 + (2 * k));
                Linear[3 + (2 * k)] = 0;
            }
        }

        if (!RingFitAlgebra.Factor(_normal, linear))
        {
            return false;
        }

        RingFitAlgebra.Forward(_normal, linear, Linear);
        RingFitAlgebra.Backward(_normal, linear, Linear);
        double squares = Product(samples, samples);
        for (int i = 0; i < linear; i++)
        {
            squares -= Linear[i] * Product(i, samples);
        }

        Squares = Math.Max(squares, 0);
        Reduce(linear, samples);
        return true;
    }

    private void Reduce(int linear, int samples)
    {
        int count = _shape.Length;
        for (int i = 0; i < count; i++)
        {
            Span<double> cross = _cross.AsSpan(i * linear, linear);
            double gradient = Cross(i, samples);
            for (int k = 0; k < linear; k++)
            {
                cross[k] = Cross(i, k);
                gradient -= Linear[k] * cross[k];
            }

            _gradient[i] = gradient;
            RingFitAlgebra.Forward(_normal, linear, cross);
            for (int j = 0; j <= i; j++)
            {
                double value = Curvature(i, j);
                for (int k = 0; k < linear; k++)
                {
                    value -= cross[k] * _cross[(j * linear) + k];
                }

                _curvature[(i * count) + j] = value;
            }
        }
    }

    /// <summary>Solves for the step; returns the reduction it promises, NaN where the curvature is not positive.</summary>
    private double Step(double damping)
    {
        int count = _shape.Length;
        _curvature.CopyTo(_damped, 0);
        _gradient.CopyTo(_step, 0);
        for (int i = 0; i < count; i++)
        {
            _damped[(i * count) + i] *= 1 + damping;
            if (IsHeld(i))
            {
                Hold(_damped, count, i);
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
            expected += _step[i] * _gradient[i];
        }

        return expected;
    }

    /// <summary>Takes an unknown out of a symmetric system: its row and column (lower triangle) become those of 1.</summary>
    private static void Hold(Span<double> matrix, int size, int unknown)
    {
        for (int j = 0; j < size; j++)
        {
            matrix[(Math.Max(j, unknown) * size) + Math.Min(j, unknown)] = j == unknown ? 1 : 0;
        }
    }

    /// <summary>Makes bare decays of modes that would turn slower than can be told, in the trial.</summary>
    private void Slow()
    {
        _bare.CopyTo(_before, 0);
        for (int k = 0; k < _modes; k++)
        {
            if (!_bare[k] && _trial[(2 * k) + 1] < SlowestTurn)
            {
                _bare[k] = true;
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
