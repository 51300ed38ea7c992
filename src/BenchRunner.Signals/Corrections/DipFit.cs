using MathNet.Numerics.LinearAlgebra;

namespace BenchRunner.Signals.Corrections;

/// <summary>The least-squares fit behind <see cref="SkewFromDip"/>, in samples.</summary>
/// <param name="Skew">By how many samples the current is later than the voltage.</param>
/// <param name="Uncertainty">Its standard uncertainty by the fit's covariance, samples.</param>
/// <param name="Inductance">Inductance, V a (A per sample).</param>
/// <param name="Misfit">Sum of squared residuals over their noise, a degree of freedom: 1 where noise is all.</param>
/// <param name="Reason">Why there is no fit; null where there is one.</param>
internal sealed record DipFit(double Skew, double Uncertainty, double Inductance, double Misfit, string? Reason)
{
    private const int Before = 30;
    private const int MostPasses = 60;
    private const int MovingPasses = 8;
    private const int HalfStepsFrom = 20;

    // A step below this part of the uncertainty changes nothing that could be told.
    private const double Settled = 0.01;

    // Spline parameters that no sample sees stay where they are.
    private const double Ridge = 1e-10;

    /// <summary>What is known before: the quiet stretch, the noise, the ring in radians a sample and its
    /// damping.</summary>
    internal sealed record Given(
        int Quiet, int Departure, double VoltageNoise, double CurrentNoise, double Ring, double Damping);

    /// <summary>Fits the stretch from before the current's onset to its end; both are samples of the current.</summary>
    public static DipFit Of(
        ReadOnlySpan<double> vds, ReadOnlySpan<double> id, Given given, int onset, int end, double knot)
    {
        int first = Math.Max(given.Quiet, onset - Before);
        DipModel model = new(given, knot, Mean(vds, given), Mean(id, given));
        for (int pass = 0; pass < MostPasses; pass++)
        {
            // The voltage of the same true instants lies earlier by the skew; after some passes the stretch stays.
            if (pass <= MovingPasses && !model.Move(vds, id, first, onset, end))
            {
                return None("current and voltage are too far apart");
            }

            int rows = model.To - model.From + 1 + end - first + 1 + DipModel.Priors;
            Matrix<double> jacobian = Matrix<double>.Build.Dense(rows, model.Size + DipModel.Further);
            Vector<double> residual = Vector<double>.Build.Dense(rows);
            model.Fill(vds, id, first, end, jacobian, residual);
            if (!Step(jacobian, residual, out double[] step, out double variance))
            {
                return None("the fit of the dip has no answer");
            }

            model.Go(step, pass < HalfStepsFrom ? 1 : 0.5);
            if (pass > MovingPasses && Math.Abs(step[model.Size]) < Settled * Math.Sqrt(variance))
            {
                double misfit = residual.DotProduct(residual) / (rows - jacobian.ColumnCount);
                return model.Inductance > 0 && double.IsFinite(model.Skew)
                    ? new DipFit(model.Skew, Math.Sqrt(variance), model.Inductance, misfit, null)
                    : None("the voltage does not dip as the current rises");
            }
        }

        return None("the fit of the dip does not settle");
    }

    private static DipFit None(string reason) => new(0, 0, 0, 0, reason);

    private static double Mean(ReadOnlySpan<double> samples, Given given)
    {
        double sum = 0;
        foreach (double sample in samples[given.Quiet..given.Departure])
        {
            sum += sample;
        }

        return sum / (given.Departure - given.Quiet);
    }

    /// <summary>Gauss and Newton's step, and the variance of the skew; false where the equations have no
    /// answer.</summary>
    private static bool Step(Matrix<double> jacobian, Vector<double> residual, out double[] step, out double variance)
    {
        int columns = jacobian.ColumnCount;
        Vector<double> size = jacobian.ColumnNorms(2);
        size.MapInplace(x => x > 0 ? x : 1, Zeros.Include);
        Matrix<double> normal = jacobian.TransposeThisAndMultiply(jacobian);
        normal.MapIndexedInplace((i, j, x) => (x / (size[i] * size[j])) + (i == j ? Ridge : 0), Zeros.Include);
        Vector<double> right = jacobian.TransposeThisAndMultiply(residual).PointwiseDivide(size);
        Vector<double> found = normal.LU().Solve(right).PointwiseDivide(size);
        Vector<double> unit = Vector<double>.Build.Dense(columns);
        int skew = columns - DipModel.Further;
        unit[skew] = 1;
        variance = normal.LU().Solve(unit)[skew] / (size[skew] * size[skew]);
        step = [.. found.Select(x => -x)];
        return variance > 0 && step.All(double.IsFinite);
    }
}
