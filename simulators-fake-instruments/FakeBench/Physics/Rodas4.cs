using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace FakeBench.Physics;

/// <summary>A stiff solver: the Rosenbrock method RODAS of order 4(3) with six stages and its own dense
/// output.</summary>
/// <remarks>
/// Source: Hairer and Wanner, Solving Ordinary Differential Equations II, section IV.7 (coefficients from memory, held
/// by tests of the order reached). Stages are in the transformed form, so that no product with the Jacobian is needed.
/// One instance serves one integration; not for several threads.
/// </remarks>
public sealed class Rodas4
{
    private const double Gamma = 0.25;
    private const double A21 = 1.544, A31 = 0.9466785280815826, A32 = 0.2557011698983284;
    private const double A41 = 3.314825187068521, A42 = 2.896124015972201, A43 = 0.9986419139977817;
    private const double A51 = 1.221224509226641, A52 = 6.019134481288629;
    private const double A53 = 12.53708332932087, A54 = -0.6878860361058950;
    private const double C21 = -5.6688, C31 = -2.430093356833875, C32 = -0.2063599157091915;
    private const double C41 = -0.1073529058151375, C42 = -9.594562251023355, C43 = -20.47028614809616;
    private const double C51 = 7.496443313967647, C52 = -10.24680431464352;
    private const double C53 = -33.99990352819905, C54 = 11.70890893206160;
    private const double C61 = 8.083246795921522, C62 = -7.981132988064893, C63 = -31.52159432874371;
    private const double C64 = 16.31930543123136, C65 = -6.058818238834054;
    private const double T2 = 0.386, T3 = 0.21, T4 = 0.63;
    private const double G1 = 0.25, G2 = -0.1043, G3 = 0.1035, G4 = -0.0362;
    private const double D21 = 10.12623508344586, D22 = -7.487995877610167, D23 = -34.80091861555747;
    private const double D24 = -7.992771707568823, D25 = 1.025137723295662;
    private const double D31 = -0.6762803392801253, D32 = 6.087714651680015, D33 = 16.43084320892478;
    private const double D34 = 24.76722511418386, D35 = -6.594389125716872;

    /// <summary>Rows are as long as a multiple of this, so that they can be worked on in whole vectors; what is beyond
    /// the system's size stays 0.</summary>
    private const int Lanes = 4;

    private const double Safety = 0.9, Shrink = 0.2, Grow = 6;

    private readonly IOdeSystem _system;
    private readonly SparseElimination _elimination;
    private readonly double _tolerance;
    private readonly int _size;
    private readonly double[] _matrix, _jacobian, _state, _perScale;
    private readonly double[] _f, _ft, _stage, _k1, _k2, _k3, _k4, _k5, _k6, _next;
    private readonly double[] _old, _end, _dense2, _dense3;

    /// <summary>Prepares an integration.</summary>
    /// <param name="system">The equations.</param>
    /// <param name="tolerance">Root mean square of the local error, in units of the system's scale; above 0.</param>
    public Rodas4(IOdeSystem system, double tolerance)
    {
        ArgumentNullException.ThrowIfNull(system);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(tolerance);
        _system = system;
        _elimination = system.Elimination;
        _tolerance = tolerance;
        _size = system.Size;
        double[] Padded(int length) => new double[(length + Lanes - 1) / Lanes * Lanes];
        (_matrix, _jacobian) = (Padded(_size * _size), Padded(_size * _size));
        (_f, _ft, _stage, _next) = (Padded(_size), Padded(_size), Padded(_size), Padded(_size));
        (_k1, _k2, _k3) = (Padded(_size), Padded(_size), Padded(_size));
        (_k4, _k5, _k6) = (Padded(_size), Padded(_size), Padded(_size));
        (_old, _end, _dense2, _dense3) = (Padded(_size), Padded(_size), Padded(_size), Padded(_size));
        (_state, _perScale) = (Padded(_size), Padded(_size));
        for (int i = 0; i < _size; i++) _perScale[i] = 1 / system.Scale[i];
    }

    /// <summary>The state reached; set it before the first step.</summary>
    public Span<double> State => _state.AsSpan(0, _size);

    /// <summary>The time reached, s.</summary>
    public double Time { get; set; }

    /// <summary>Start of the last step, s.</summary>
    public double StepStart { get; private set; }

    /// <summary>Length of the last step, s; where a state turned, it ended before.</summary>
    public double StepLength { get; private set; }

    /// <summary>The step to try next, s; set it at a corner of the input.</summary>
    public double NextStep { get; set; } = 10e-12;

    /// <summary>No step is longer, s: between the ends of a long one the interpolation is only as good as the step's
    /// own
    /// order allows, and stiff states suffer first.</summary>
    public double LongestStep { get; init; } = double.PositiveInfinity;

    /// <summary>Steps accepted so far.</summary>
    public int Accepted { get; private set; }

    /// <summary>Steps tried again with a smaller step.</summary>
    public int Rejected { get; private set; }

    /// <summary>Takes one step that meets the tolerance.</summary>
    /// <param name="limit">Time not to be passed, s; after <see cref="Time"/>. It is met exactly.</param>
    /// <exception cref="ArithmeticException">No step however small meets the tolerance.</exception>
    public void Advance(double limit)
    {
        _system.Linearise(Time, State, _f, _jacobian.AsSpan(0, _size * _size), _ft);
        while (true)
        {
            double step = NextStep;
            bool last = Time + step * 1.0001 >= limit;
            if (last) step = limit - Time;
            double error = Try(step);
            double factor = error > 0 ? Math.Clamp(Safety / Math.Sqrt(Math.Sqrt(error)), Shrink, Grow) : Grow;
            if (error <= 1)
            {
                Accept(step, last ? limit : Time + step);
                // A step cut short by the limit says nothing against the longer one that was planned.
                double wanted = last ? Math.Max(NextStep, step * factor) : step * factor;
                NextStep = StepLadder.RoundDown(Math.Min(wanted, LongestStep));
                if (_system.Turning >= 0) StopAtTurn(_system.Turning);
                return;
            }

            Rejected++;
            if (step <= StepLadder.Smallest) throw new ArithmeticException($"The solver is stuck at {Time} s.");
            NextStep = StepLadder.RoundDown(step * (double.IsNaN(error) ? Shrink : factor));
        }
    }

    /// <summary>The state inside the last step.</summary>
    /// <param name="time">Between the step's ends, s.</param>
    /// <param name="state">Receives the state.</param>
    public void Interpolate(double time, Span<double> state)
    {
        double s = (time - StepStart) / StepLength;
        double r = 1 - s;
        Span<Vector256<double>> old = Wide(_old), end = Wide(_end), dense2 = Wide(_dense2), dense3 = Wide(_dense3);
        var wide = MemoryMarshal.Cast<double, Vector256<double>>(state[..Math.Min(_size, state.Length)]);
        for (int i = 0; i < wide.Length; i++)
        {
            wide[i] = old[i] * r + s * (end[i] + r * (dense2[i] + s * dense3[i]));
        }

        for (int i = Lanes * wide.Length; i < _size && i < state.Length; i++) state[i] = Inside(i, s);
    }

    private double Inside(int i, double s)
    {
        double r = 1 - s;
        return _old[i] * r + s * (_end[i] + r * (_dense2[i] + s * _dense3[i]));
    }

    private void Accept(double step, double time)
    {
        Span<Vector256<double>> k1 = Wide(_k1), k2 = Wide(_k2), k3 = Wide(_k3), k4 = Wide(_k4), k5 = Wide(_k5);
        Span<Vector256<double>> dense2 = Wide(_dense2), dense3 = Wide(_dense3);
        for (int i = 0; i < dense2.Length; i++)
        {
            dense2[i] = D21 * k1[i] + D22 * k2[i] + D23 * k3[i] + D24 * k4[i] + D25 * k5[i];
            dense3[i] = D31 * k1[i] + D32 * k2[i] + D33 * k3[i] + D34 * k4[i] + D35 * k5[i];
        }

        _state.CopyTo(_old, 0);
        _next.CopyTo(_state, 0);
        _next.CopyTo(_end, 0);
        (StepStart, StepLength, Time) = (Time, step, time);
        Accepted++;
    }

    /// <summary>Ends the last step just after a state has passed 0, so that no step holds two sets of equations; never
    /// before a sixteenth of it, so that it gets on.</summary>
    private void StopAtTurn(int turning)
    {
        double side = _old[turning] != 0 ? _old[turning] : _f[turning];
        if (side * _state[turning] >= 0) return;
        double before = 1.0 / 16, after = 1;
        for (int i = 0; i < 40; i++)
        {
            double middle = 0.5 * (before + after);
            if (side * Inside(turning, middle) > 0) before = middle;
            else after = middle;
        }

        Time = StepStart + after * StepLength;
        for (int i = 0; i < _size; i++) _state[i] = Inside(i, after);
    }

    private double Try(double step)
    {
        Factor(step);
        double r = 1 / step;
        double t = Time;
        Span<Vector256<double>> y = Wide(_state), f = Wide(_f), ft = Wide(_ft), stage = Wide(_stage);
        Span<Vector256<double>> k1 = Wide(_k1), k2 = Wide(_k2), k3 = Wide(_k3), k4 = Wide(_k4), k5 = Wide(_k5);
        var k6 = Wide(_k6);
        int n = y.Length;

        for (int i = 0; i < n; i++) k1[i] = f[i] + step * G1 * ft[i];
        _elimination.Solve(_matrix, _k1);

        for (int i = 0; i < n; i++) stage[i] = y[i] + A21 * k1[i];
        _system.Evaluate(t + T2 * step, _stage, _k2);
        for (int i = 0; i < n; i++) k2[i] += r * C21 * k1[i] + step * G2 * ft[i];
        _elimination.Solve(_matrix, _k2);

        for (int i = 0; i < n; i++) stage[i] = y[i] + A31 * k1[i] + A32 * k2[i];
        _system.Evaluate(t + T3 * step, _stage, _k3);
        for (int i = 0; i < n; i++) k3[i] += r * (C31 * k1[i] + C32 * k2[i]) + step * G3 * ft[i];
        _elimination.Solve(_matrix, _k3);

        for (int i = 0; i < n; i++) stage[i] = y[i] + A41 * k1[i] + A42 * k2[i] + A43 * k3[i];
        _system.Evaluate(t + T4 * step, _stage, _k4);
        for (int i = 0; i < n; i++) k4[i] += r * (C41 * k1[i] + C42 * k2[i] + C43 * k3[i]) + step * G4 * ft[i];
        _elimination.Solve(_matrix, _k4);

        for (int i = 0; i < n; i++) stage[i] = y[i] + A51 * k1[i] + A52 * k2[i] + A53 * k3[i] + A54 * k4[i];
        _system.Evaluate(t + step, _stage, _k5);
        for (int i = 0; i < n; i++) k5[i] += r * (C51 * k1[i] + C52 * k2[i] + C53 * k3[i] + C54 * k4[i]);
        _elimination.Solve(_matrix, _k5);

        for (int i = 0; i < n; i++) stage[i] += k5[i];
        _system.Evaluate(t + step, _stage, _k6);
        for (int i = 0; i < n; i++)
        {
            k6[i] += r * (C61 * k1[i] + C62 * k2[i] + C63 * k3[i] + C64 * k4[i] + C65 * k5[i]);
        }

        _elimination.Solve(_matrix, _k6);
        return Finish();
    }

    private double Finish()
    {
        Span<Vector256<double>> next = Wide(_next), stage = Wide(_stage), k6 = Wide(_k6), perScale = Wide(_perScale);
        var sum = Vector256<double>.Zero;
        for (int i = 0; i < next.Length; i++)
        {
            next[i] = stage[i] + k6[i];
            var e = k6[i] * perScale[i];
            sum += e * e;
        }

        return Math.Sqrt(Vector256.Sum(sum) / _size) / _tolerance;
    }

    private void Factor(double step)
    {
        Span<Vector256<double>> matrix = Wide(_matrix), jacobian = Wide(_jacobian);
        for (int i = 0; i < matrix.Length; i++) matrix[i] = -jacobian[i];
        double diagonal = 1 / (step * Gamma);
        for (int i = 0; i < _size; i++) _matrix[i * _size + i] += diagonal;
        _elimination.Factor(_matrix);
    }

    private static Span<Vector256<double>> Wide(double[] row) =>
        MemoryMarshal.Cast<double, Vector256<double>>(row.AsSpan());
}
