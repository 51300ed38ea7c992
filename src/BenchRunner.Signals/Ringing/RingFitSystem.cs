namespace BenchRunner.Signals.Ringing;

/// <summary>The normal equations of a ring fit at one shape: linear unknowns solved, the others reduced.</summary>
internal sealed class RingFitSystem
{
    private readonly int _modes;
    private readonly double[] _products;
    private readonly double[] _normal;
    private readonly double[] _cross;
    private readonly double[] _curvature;
    private readonly double[] _gradient;
    private readonly double[] _linear;

    /// <summary>Makes the system of a number of modes.</summary>
    public RingFitSystem(int modes)
    {
        _modes = modes;
        int linear = RingFitColumns.Linear(modes), width = RingFitColumns.Width(modes), shape = 2 * modes;
        _products = new double[width * width];
        _normal = new double[linear * linear];
        _cross = new double[shape * linear];
        _curvature = new double[shape * shape];
        _gradient = new double[shape];
        _linear = new double[linear];
        Bare = new bool[modes];
    }

    /// <summary>Which modes are bare decays: their sine and their turn are left out.</summary>
    public bool[] Bare { get; }

    /// <summary>c, d (a window), then p and q of each mode: p cos + q sin.</summary>
    public ReadOnlySpan<double> Linear => _linear;

    /// <summary>Half the falling slope of the sum of squares along s and w of each mode.</summary>
    public ReadOnlySpan<double> Gradient => _gradient;

    /// <summary>Curvature along s and w of each mode, the linear unknowns following; lower triangle.</summary>
    public ReadOnlySpan<double> Curvature => _curvature;

    /// <summary>Sum of squared residuals, as the products give it.</summary>
    public double Squares { get; private set; }

    /// <summary>Sum of the squared samples.</summary>
    public double Whole => Product(RingFitColumns.Samples(_modes), RingFitColumns.Samples(_modes));

    /// <summary>Whether an unknown is the turn of a bare decay.</summary>
    public bool IsHeld(int shape) => shape % 2 == 1 && Bare[shape / 2];

    /// <summary>Solves the linear unknowns at a shape, and forms gradient and reduced curvature there.</summary>
    public bool Evaluate(ReadOnlySpan<double> y, ReadOnlySpan<double> shape)
    {
        RingFitColumns.Multiply(y, shape, _products);
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
                Hold(_normal, linear, 3 + (2 * k));
                _linear[3 + (2 * k)] = 0;
            }
        }

        if (!RingFitAlgebra.Factor(_normal, linear))
        {
            return false;
        }

        RingFitAlgebra.Forward(_normal, linear, _linear);
        RingFitAlgebra.Backward(_normal, linear, _linear);
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
        int count = _gradient.Length;
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
                double value = Bend(i, j);
                for (int k = 0; k < linear; k++)
                {
                    value -= cross[k] * _cross[(j * linear) + k];
                }

                _curvature[(i * count) + j] = value;
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
        Span<double> scale = stackalloc double[size];
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

    /// <summary>Takes an unknown out of a symmetric system (lower triangle): its row and column become those of 1.
    /// </summary>
    public static void Hold(Span<double> matrix, int size, int unknown)
    {
        for (int j = 0; j < size; j++)
        {
            matrix[(Math.Max(j, unknown) * size) + Math.Min(j, unknown)] = j == unknown ? 1 : 0;
        }
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
