using MathNet.Numerics.LinearAlgebra;

namespace BenchRunner.Signals.Corrections;

/// <summary>What <see cref="DipFit"/> fits: the true current as a spline that both channels see, in samples.</summary>
/// <param name="given">What is known before.</param>
/// <param name="knot">Samples from knot to knot.</param>
/// <param name="bus">Voltage before the edge, V.</param>
/// <param name="rest">Current before the edge, A.</param>
internal sealed class DipModel(DipFit.Given given, double knot, double bus, double rest)
{
    /// <summary>Parameters behind the spline's: skew, inductance, part of the losses in series, both rests.</summary>
    public const int Further = 5;

    /// <summary>Rows for what is known before: that part, and both rests.</summary>
    public const int Priors = 3;

    private const int FewestSamples = 4;
    private const double LargestStep = 3;
    private const double StartRidge = 1e-3;

    // Standard deviation of what is uniform from 0 to 1.
    private static readonly double _uniform = 1 / Math.Sqrt(12);

    private readonly double _late = 2 * given.Damping / given.Ring;
    private readonly double _ohmic = 2 * given.Damping * given.Ring;
    private readonly double _busBefore = bus;
    private readonly double _restBefore = rest;
    private double[] _spline = [];
    private double _series = 0.5;
    private double _bus = bus;
    private double _rest = rest;

    /// <summary>By how many samples the current is later.</summary>
    public double Skew { get; private set; }

    /// <summary>Inductance, V a (A per sample).</summary>
    public double Inductance { get; private set; }

    /// <summary>First sample of the voltage, where the spline starts.</summary>
    public int From { get; private set; }

    /// <summary>Last sample of the voltage.</summary>
    public int To { get; private set; }

    /// <summary>Parameters of the spline.</summary>
    public int Size { get; private set; }

    /// <summary>Puts the stretch of the voltage under that of the current; false where too little is left.</summary>
    public bool Move(ReadOnlySpan<double> vds, ReadOnlySpan<double> id, int first, int onset, int end)
    {
        (int from, int size) = (From, Size);
        From = Math.Max(0, first - (int)Math.Ceiling(Math.Max(Skew, 0)));
        To = (int)Math.Min(vds.Length - 1, Math.Floor(end - Skew));
        Size = (int)Math.Ceiling((To - From) / knot) + 3;
        if (!(To - onset + Skew >= FewestSamples))
        {
            return false;
        }

        _spline = from == From && size == Size ? _spline : Start(id, first, end);
        Inductance = Inductance == 0 ? Guess(vds) : Inductance;
        return true;
    }

    /// <summary>Residuals over their noise, and how they change with each parameter.</summary>
    public void Fill(
        ReadOnlySpan<double> vds,
        ReadOnlySpan<double> id,
        int first,
        int end,
        Matrix<double> jacobian,
        Vector<double> residual)
    {
        int row = 0;
        for (int k = From; k <= To; k++, row++)
        {
            FillVoltage(vds[k], k, row, jacobian, residual);
        }

        for (int k = first; k <= end; k++, row++)
        {
            FillCurrent(id[k], k, row, jacobian, residual);
        }

        double root = Math.Sqrt(given.Departure - given.Quiet);
        double volts = root / given.VoltageNoise, amperes = root / given.CurrentNoise;
        (residual[row], jacobian[row, Size + 2]) = ((_series - 0.5) / _uniform, 1 / _uniform);
        (residual[row + 1], jacobian[row + 1, Size + 3]) = ((_bus - _busBefore) * volts, volts);
        (residual[row + 2], jacobian[row + 2, Size + 4]) = ((_rest - _restBefore) * amperes, amperes);
    }

    /// <summary>Goes a part of a step, by no more than some samples: the ramp is short.</summary>
    public void Go(double[] step, double part)
    {
        part = Math.Min(part, LargestStep / Math.Max(Math.Abs(step[Size]), double.Epsilon));
        for (int j = 0; j < Size; j++)
        {
            _spline[j] += part * step[j];
        }

        Skew += part * step[Size];
        Inductance += part * step[Size + 1];
        _series += part * step[Size + 2];
        _bus += part * step[Size + 3];
        _rest += part * step[Size + 4];
    }

    private void FillVoltage(double vds, int k, int row, Matrix<double> jacobian, Vector<double> residual)
    {
        (int at, Basis b) = Basis.At((k - From) / knot, Size);
        double slope = 0, bend = 0, value = 0;
        for (int j = 0; j < 4; j++)
        {
            double once = b[1, j] / knot, twice = b[2, j] / (knot * knot);
            value += _spline[at + j] * b[0, j];
            slope += _spline[at + j] * once;
            bend += _spline[at + j] * twice;
            jacobian[row, at + j] = Inductance
                * (once - ((1 - _series) * _late * twice) + (_series * _ohmic * b[0, j])) / given.VoltageNoise;
        }

        double drop = slope - ((1 - _series) * _late * bend) + (_series * _ohmic * value);
        residual[row] = (vds - _bus + (Inductance * drop)) / given.VoltageNoise;
        jacobian[row, Size + 1] = drop / given.VoltageNoise;
        jacobian[row, Size + 2] = Inductance * ((_late * bend) + (_ohmic * value)) / given.VoltageNoise;
        jacobian[row, Size + 3] = -1 / given.VoltageNoise;
    }

    private void FillCurrent(double id, int k, int row, Matrix<double> jacobian, Vector<double> residual)
    {
        (int at, Basis b) = Basis.At((k - Skew - From) / knot, Size);
        double value = 0, slope = 0;
        for (int j = 0; j < 4; j++)
        {
            value += _spline[at + j] * b[0, j];
            slope += _spline[at + j] * b[1, j] / knot;
            jacobian[row, at + j] = -b[0, j] / given.CurrentNoise;
        }

        residual[row] = (id - _rest - value) / given.CurrentNoise;
        jacobian[row, Size] = slope / given.CurrentNoise;
        jacobian[row, Size + 4] = -1 / given.CurrentNoise;
    }

    /// <summary>The spline through the current alone.</summary>
    private double[] Start(ReadOnlySpan<double> id, int first, int end)
    {
        Matrix<double> values = Matrix<double>.Build.Dense(Size, Size);
        Vector<double> right = Vector<double>.Build.Dense(Size);
        for (int k = first; k <= end; k++)
        {
            (int at, Basis b) = Basis.At((k - Skew - From) / knot, Size);
            for (int j = 0; j < 4; j++)
            {
                right[at + j] += b[0, j] * (id[k] - _rest);
                for (int l = 0; l < 4; l++)
                {
                    values[at + j, at + l] += b[0, j] * b[0, l];
                }
            }
        }

        for (int j = 0; j < Size; j++)
        {
            values[j, j] += StartRidge;
        }

        return [.. values.LU().Solve(right)];
    }

    /// <summary>The inductance by the dip's and the slope's products alone.</summary>
    private double Guess(ReadOnlySpan<double> vds)
    {
        double products = 0, squares = double.Epsilon;
        for (int k = From; k <= To; k++)
        {
            (int at, Basis b) = Basis.At((k - From) / knot, Size);
            double slope = 0;
            for (int j = 0; j < 4; j++)
            {
                slope += _spline[at + j] * b[1, j] / knot;
            }

            (products, squares) = (products + (slope * (_bus - vds[k])), squares + (slope * slope));
        }

        return products / squares;
    }
}
