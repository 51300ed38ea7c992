using BenchRunner.Signals.Ringing;
using MathNet.Numerics.LinearAlgebra;
using Complex = System.Numerics.Complex;

namespace BenchRunner.Signals.Corrections;

/// <summary>The gate's ringing after a turn-off against the drain's, in samples: the fit behind
/// <see cref="SkewFromGate"/>.</summary>
/// <param name="Skew">By how many samples the gate is later, but for whole periods.</param>
/// <param name="Uncertainty">Its standard uncertainty by the noise of both channels, samples.</param>
/// <param name="Reason">Why there is no fit; null where there is one.</param>
internal sealed record GateRing(double Skew, double Uncertainty, string? Reason)
{
    private const int FirstMode = 2;
    private const int FewestPerUnknown = 2;
    private const int Halvings = 40;
    private const int Starts = 24;

    // Relative standard uncertainty of the time constant up to which the equations are near to linear.
    private const double LargestDoubt = 0.5;

    // Standard uncertainty of the phase up to which it is one, rad.
    private const double LargestPhase = 0.25;

    // The gate's time constant is sought from a tenth of the ring's period to ten periods.
    private static readonly double _widest = Math.Log(10);

    /// <summary>Fits both channels over a stretch, the poles given; the gate's begins later by some samples.</summary>
    public static GateRing Of(
        ReadOnlySpan<double> vds, ReadOnlySpan<double> vgs, Complex[] poles, int from, int to, int late)
    {
        if (from + late < 0 || to + late >= vgs.Length || to - from < FewestPerUnknown * (3 + (2 * poles.Length)))
        {
            return None("too little of the ringing is inside the record");
        }

        Complex pole = poles[0];
        double[] drain = vds[from..(to + 1)].ToArray(), gate = vgs[(from + late)..(to + late + 1)].ToArray();

        Matrix<double> columns = Columns(drain.Length, poles, n => n / drain.Length);
        Vector<double> drainRing = Solve(columns, drain, out Vector<double> rest);
        (Complex drainAt, double drainDoubt) = Phase(columns, drainRing, rest, pole, 0);

        double tau = Tau(gate, poles, 2 * Math.PI / pole.Imaginary);
        columns = Columns(gate.Length, poles, n => Math.Exp(-n / tau));
        Vector<double> gateRing = Solve(columns, gate, out rest);
        double decay = gateRing[1];
        Matrix<double> jacobian = columns.InsertColumn(
            columns.ColumnCount,
            Vector<double>.Build.Dense(gate.Length, n => decay * n / tau * Math.Exp(-n / tau)));
        Complex along = pole * tau;
        (Complex gateAt, double gateDoubt) =
            Phase(jacobian, gateRing, rest, pole, (1 / (1 + along)).Imaginary / pole.Imaginary);

        // What is in the gate's loop acts through its resistance and capacitance (high-pass); the voltage across the
        // source's inductance goes with the second derivative of the drain's.
        Complex answer = gateAt / drainAt / (along / (1 + along)) / (pole * pole);
        double noise = Math.Sqrt((drainDoubt * drainDoubt) + (gateDoubt * gateDoubt));
        return !double.IsFinite(noise) || gateDoubt * pole.Imaginary > LargestPhase
            ? None("the gate's ringing is within its noise")
            : new GateRing(late - (answer.Phase / pole.Imaginary), noise, null);
    }

    private static GateRing None(string reason) => new(0, 0, reason);

    /// <summary>Constant, a second column, and cosine and sine of each mode.</summary>
    private static Matrix<double> Columns(int count, Complex[] poles, Func<double, double> second)
    {
        Matrix<double> columns = Matrix<double>.Build.Dense(count, FirstMode + (2 * poles.Length));
        for (int n = 0; n < count; n++)
        {
            (columns[n, 0], columns[n, 1]) = (1, second(n));
            for (int k = 0; k < poles.Length; k++)
            {
                Complex at = Complex.Exp(poles[k] * n);
                columns[n, FirstMode + (2 * k)] = at.Real;
                columns[n, FirstMode + (2 * k) + 1] = at.Imaginary;
            }
        }

        return columns;
    }

    private static Vector<double> Solve(Matrix<double> columns, double[] samples, out Vector<double> rest)
    {
        Vector<double> given = Vector<double>.Build.Dense(samples);
        Vector<double> found = columns.TransposeThisAndMultiply(columns).LU()
            .Solve(columns.TransposeThisAndMultiply(given));
        rest = given - (columns * found);
        return found;
    }

    /// <summary>The strongest mode's complex amplitude, and the standard uncertainty of its phase in samples, that of
    /// one more unknown (the last column) with it.</summary>
    private static (Complex Amplitude, double Doubt) Phase(
        Matrix<double> jacobian, Vector<double> found, Vector<double> rest, Complex pole, double further)
    {
        (double cosine, double sine) = (found[FirstMode], found[FirstMode + 1]);
        double scale = ((cosine * cosine) + (sine * sine)) * pole.Imaginary;
        Vector<double> slope = Vector<double>.Build.Dense(jacobian.ColumnCount);
        slope[FirstMode] = -sine / scale;
        slope[FirstMode + 1] = cosine / scale;
        bool hasFurther = jacobian.ColumnCount > found.Count;
        if (hasFurther)
        {
            slope[^1] = further;
        }

        Matrix<double> inverse = jacobian.TransposeThisAndMultiply(jacobian).Inverse();
        double[] padded = new double[rest.Count + RingFitNoise.Longest];
        rest.AsArray().CopyTo(padded, 0);
        RingFitNoise noise = RingFitNoise.Of(padded);
        double variance = rest.DotProduct(rest) / (rest.Count - jacobian.ColumnCount);
        double power = variance * noise.Power((jacobian * (inverse * slope)).AsArray());
        bool known = !hasFurther || variance * inverse[found.Count, found.Count] < LargestDoubt * LargestDoubt;
        return (new Complex(cosine, -sine), known ? Math.Sqrt(power) : double.NaN);
    }

    /// <summary>The time constant that leaves the least of the gate, samples.</summary>
    private static double Tau(double[] gate, Complex[] poles, double period)
    {
        double Left(double log)
        {
            double tau = period * Math.Exp(log);
            Solve(Columns(gate.Length, poles, n => Math.Exp(-n / tau)), gate, out Vector<double> rest);
            return rest.DotProduct(rest);
        }

        double step = 2 * _widest / Starts, best = -_widest, least = double.PositiveInfinity;
        for (int i = 0; i <= Starts; i++)
        {
            double at = -_widest + (i * step), left = Left(at);
            (best, least) = left < least ? (at, left) : (best, least);
        }

        // The golden section.
        const double golden = 0.6180339887498949;
        double low = best - step, high = best + step;
        for (int i = 0; i < Halvings; i++)
        {
            double a = high - (golden * (high - low)), b = low + (golden * (high - low));
            (low, high) = Left(a) < Left(b) ? (low, b) : (a, high);
        }

        return period * Math.Exp((low + high) / 2);
    }
}
