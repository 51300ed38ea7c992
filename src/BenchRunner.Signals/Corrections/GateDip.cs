using BenchRunner.Signals.Fitting;

namespace BenchRunner.Signals.Corrections;

/// <summary>The gate's answer to the dip of the drain's voltage at turn-on: which of several skews it allows.</summary>
/// <remarks>
/// While the current rises, the drain's voltage dips by L di/dt and the gate jumps by its part Ls di/dt, both from the
/// same instant on: vgs = a + b e^(−t/τ) − c (v − low-pass of v with τ), c above 0. No period makes that ambiguous, as
/// it makes a ring's phase; to less than a sample it is not known, since the losses of the loop are left out.
/// </remarks>
/// <param name="vds">The drain's voltage, V.</param>
/// <param name="vgs">The gate's voltage, V.</param>
/// <param name="departure">Where the gate departs, in its own samples.</param>
/// <param name="half">Where the drain's voltage falls through half of the bus, in its own samples.</param>
internal sealed class GateDip(double[] vds, double[] vgs, double departure, double half)
{
    private const int Columns = 3;
    private const int FewestSamples = 12;
    private const int Before = 50;
    private const int Taus = 16;

    // The driver's own edge and the drain's fall lie at the ends of the stretch.
    private const double StartMargin = 0.1;
    private const double EndMargin = 0.2;

    // The gate's time constant is sought from a tenth of the stretch to ten times it.
    private const double Widest = 100;

    // What a sum of squares loses in differences.
    private const double Rounding = 1e-14;

    /// <summary>How much likelier a skew makes the gate's samples than no answer to the drain at all.</summary>
    /// <param name="skew">The skew, in samples.</param>
    /// <returns>The logarithm of the ratio of likelihoods; 0 where the answer would have the sign of the capacitance's,
    /// or too little of the edge is left.</returns>
    public double Gain(double skew)
    {
        int first = (int)Math.Ceiling(departure + (StartMargin * (half - departure)));
        int last = (int)Math.Floor(half + skew - (EndMargin * (half - departure)));
        int from = (int)Math.Max(0, first - Before - Math.Max(0, skew));
        int to = (int)Math.Min(vds.Length, Math.Ceiling(last - skew) + Before);
        if (last - first + 1 < FewestSamples || last >= vgs.Length || from >= first - skew)
        {
            return 0;
        }

        (double without, double with, double answer) = (double.PositiveInfinity, double.PositiveInfinity, 0);
        double[] high = new double[to - from];
        for (int i = 0; i < Taus; i++)
        {
            double tau = (half - departure) / Math.Sqrt(Widest) * Math.Pow(Widest, i / (Taus - 1.0));
            HighPass(vds.AsSpan(from, high.Length), tau, high);
            without = Math.Min(without, Left(high, first, last, from + skew, tau, Columns - 1, out _));
            double left = Left(high, first, last, from + skew, tau, Columns, out double coefficient);
            (with, answer) = left < with ? (left, coefficient) : (with, answer);
        }

        return answer < 0 ? (last - first + 1) / 2.0 * Math.Log(without / with) : 0;
    }

    /// <summary>Sum of squares that constant, decay and the drain's part, or the first two, leave of the gate.</summary>
    private double Left(
        double[] high, int first, int last, double offset, double tau, int columns, out double coefficient)
    {
        Span<double> normal = stackalloc double[columns * columns], right = stackalloc double[columns];
        Span<double> row = stackalloc double[Columns];
        double squares = 0;
        for (int k = first; k <= last; k++)
        {
            row[0] = 1;
            row[1] = Math.Exp(-(k - first) / tau);
            row[2] = SkewCorrection.At(high, k - offset);
            for (int i = 0; i < columns; i++)
            {
                right[i] += row[i] * vgs[k];
                for (int j = 0; j <= i; j++)
                {
                    normal[(i * columns) + j] += row[i] * row[j];
                }
            }

            squares += vgs[k] * vgs[k];
        }

        coefficient = 0;
        if (!Cholesky.Factor(normal, columns))
        {
            return double.PositiveInfinity;
        }

        // With A = L Lᵀ the part explained is the square of L⁻¹ b.
        double sum = squares;
        Cholesky.Forward(normal, columns, right);
        foreach (double part in right)
        {
            squares -= part * part;
        }

        coefficient = right[^1] / normal[^1];
        return Math.Max(squares, Rounding * sum);
    }

    /// <summary>Less its low-pass; exact for straight lines between the samples.</summary>
    private static void HighPass(ReadOnlySpan<double> samples, double tau, Span<double> high)
    {
        double keep = Math.Exp(-1 / tau);
        high[0] = 0;
        for (int i = 1; i < high.Length; i++)
        {
            high[i] = (high[i - 1] * keep) + (tau * (samples[i] - samples[i - 1]) * (1 - keep));
        }
    }
}
