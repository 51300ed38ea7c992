using BenchRunner.Signals.Fitting;

namespace BenchRunner.Signals.Ringing;

/// <summary>The normal equations of a ring fit: linear unknowns solved, decays and frequencies searched.</summary>
/// <remarks>
/// The linear unknowns are eliminated at every point (variable projection; Golub and Pereyra 1973, in the
/// simplification of Kaufman 1975, from memory), so that only two unknowns a mode are searched and a poor start of
/// amplitudes cannot mislead. Everything rests on <see cref="RingFitColumns"/>: one pass over the samples a point.
/// </remarks>
internal sealed class RingFitSystem : NormalEquations
{
    /// <summary>
    /// The slowest turn, rad over the window. A mode that would turn slower is a bare decay: from there on its sine is
    /// left out, without which amplitudes and decay could not be told apart.
    /// </summary>
    private const double SlowestTurn = 0.1;

    /// <summary>Changes below this part of the samples' squares cannot be told from rounding.</summary>
    private const double Resolution = 1e-12;

    private readonly ReadOnlyMemory<double> _samples;
    private readonly int _modes;
    private readonly bool[] _before;
    private readonly double[] _products;
    private readonly double[] _normal;
    private readonly double[] _cross;
    private readonly double[] _linear;

    /// <summary>Makes the system of a number of modes.</summary>
    /// <param name="samples">Samples; not copied.</param>
    /// <param name="modes">Modes, 1 to 3.</param>
    public RingFitSystem(ReadOnlyMemory<double> samples, int modes)
        : base(2 * modes)
    {
        _samples = samples;
        _modes = modes;
        int linear = RingFitColumns.Linear(modes), width = RingFitColumns.Width(modes);
        _products = new double[width * width];
        _normal = new double[linear * linear];
        _cross = new double[Unknowns * linear];
        _linear = new double[linear];
        _before = new bool[modes];
        Bare = new bool[modes];
    }

    /// <summary>Which modes are bare decays: their sine and their turn are left out.</summary>
    public bool[] Bare { get; }

    /// <summary>c, d (a window), then p and q of each mode: p cos + q sin.</summary>
    public ReadOnlySpan<double> Linear => _linear;

    /// <summary>The sum of squares is a difference of products: a part of the samples' own.</summary>
    public override double Rounding =>
        Resolution * Product(RingFitColumns.Samples(_modes), RingFitColumns.Samples(_modes));

    /// <summary>Whether an unknown is the turn of a bare decay.</summary>
    public override bool IsHeld(int unknown) => unknown % 2 == 1 && Bare[unknown / 2];

    /// <summary>|s| + w of the mode: decay and frequency are known about equally well.</summary>
    public override double Size(ReadOnlySpan<double> unknowns, int unknown) =>
        Math.Abs(unknowns[unknown & ~1]) + unknowns[unknown | 1];

    /// <summary>Makes bare decays of modes that would turn slower than can be told; refuses what is no ring.</summary>
    public override bool Admit(Span<double> trial)
    {
        Bare.CopyTo(_before, 0);
        int samples = _samples.Length;
        bool allowed = true;
        for (int k = 0; k < _modes; k++)
        {
            ref double s = ref trial[2 * k], w = ref trial[(2 * k) + 1];
            if (!Bare[k] && w < SlowestTurn)
            {
                Bare[k] = true;
                w = 0;
            }

            // Growing by e⁵ over the window, or gone within half a sample, is no ring; neither is beyond Nyquist.
            allowed = allowed && s > -5 && s < 2.0 * samples && (Bare[k] || w < Math.PI * samples);
        }

        return allowed;
    }

    /// <inheritdoc/>
    public override void Withdraw() => _before.CopyTo(Bare, 0);

    /// <summary>Solves the linear unknowns at a shape, and forms gradient and reduced curvature there.</summary>
    /// <param name="unknowns">s and w of each mode: σ and ω times the window.</param>
    public override bool Evaluate(ReadOnlySpan<double> unknowns)
    {
        RingFitColumns.Multiply(_samples.Span, unknowns, _products);
        int linear = _linear.Length, samples = RingFitColumns.Samples(_modes);
        for (int i = 0; i < linear; i++)
        {
            for (int j = 0; j <= i; j++)
            {
                _normal[(i * linear) + j] = Product(j, i);
            }

            _linear[i] = Product(i, samples);
        }

        for (int k = 0; k < _modes; k++)
        {
            if (Bare[k])
            {
                Cholesky.Hold(_normal, linear, 3 + (2 * k));
                _linear[3 + (2 * k)] = 0;
            }
        }

        if (!Cholesky.Factor(_normal, linear))
        {
            return false;
        }

        Cholesky.Forward(_normal, linear, _linear);
        Cholesky.Backward(_normal, linear, _linear);
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
        int count = Unknowns;
        for (int i = 0; i < count; i++)
        {
            Span<double> cross = _cross.AsSpan(i * linear, linear);
            double gradient = Cross(i, samples);
            for (int k = 0; k < linear; k++)
            {
                cross[k] = Cross(i, k);
                gradient -= Linear[k] * cross[k];
            }

            Gradient[i] = gradient;
            Cholesky.Forward(_normal, linear, cross);
            for (int j = 0; j <= i; j++)
            {
                double value = Bend(i, j);
                for (int k = 0; k < linear; k++)
                {
                    value -= cross[k] * _cross[(j * linear) + k];
                }

                Curvature[(i * count) + j] = value;
            }
        }
    }

    /// <summary>The inverse of JᵀJ at the fit, for c, d, p and q a mode, s and w a mode, in this order.</summary>
    /// <param name="inverse">Receives the matrix, (2 + 4 modes)².</param>
    /// <returns>False where the unknowns cannot be told apart.</returns>
    public bool Covariance(Span<double> inverse)
    {
        int linear = RingFitColumns.Linear(_modes), size = linear + (2 * _modes);
        Span<double> factor = stackalloc double[size * size];
        for (int i = 0; i < size; i++)
        {
            for (int j = 0; j <= i; j++)
            {
                factor[(i * size) + j] = i < linear ? Product(i, j)
                    : j < linear ? Cross(i - linear, j)
                    : Bend(i - linear, j - linear);
            }
        }

        for (int k = 0; k < _modes; k++)
        {
            if (Bare[k])
            {
                Cholesky.Hold(factor, size, 3 + (2 * k));
                Cholesky.Hold(factor, size, linear + 1 + (2 * k));
            }
        }

        return Cholesky.Invert(factor, size, inverse);
    }

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

    private double Bend(int i, int j)
    {
        (int at, double cosine, double sine) = Derivative(j);
        return (cosine * Cross(i, at)) + (sine * Cross(i, at + 1));
    }
}
