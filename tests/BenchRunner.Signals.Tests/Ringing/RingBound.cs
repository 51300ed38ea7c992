namespace BenchRunner.Signals.Tests.Ringing;

/// <summary>The Cramér-Rao bound: the least spread that any unbiased estimate can have, here of frequency and damping.
/// </summary>
/// <remarks>
/// In white noise of standard deviation σ no covariance lies below σ² (JᵀJ)⁻¹, J the derivatives of the model along all
/// its unknowns: c, d, and f, ζ, A and φ of each mode (Kay, Fundamentals of Statistical Signal Processing, Estimation
/// Theory, 1993, chapter 3, from memory). RingFitReferenceTests holds the fit against bounds computed elsewhere.
/// </remarks>
internal static class RingBound
{
    /// <summary>Standard deviations of each mode's f and ζ relative to their values.</summary>
    public static (double F, double Damping)[] Of(RingRecord record)
    {
        int size = 2 + (4 * record.Modes.Length);
        double[,] fisher = new double[size, 2 * size];
        double[] row = new double[size];
        for (int n = 0; n < record.Count; n++)
        {
            Derive(record, n, row);
            for (int i = 0; i < size; i++)
            {
                for (int j = 0; j < size; j++)
                {
                    fisher[i, j] += row[i] * row[j];
                }
            }
        }

        Invert(fisher, size);
        return [.. record.Modes.Select((_, k) => (Spread(2 + (4 * k)), Spread(3 + (4 * k))))];

        double Spread(int i) => record.Sigma * Math.Sqrt(fisher[i, size + i]);
    }

    private static void Derive(RingRecord record, int n, double[] row)
    {
        double t = n * record.Dt;
        row[0] = 1;
        row[1] = (double)n / record.Count;
        for (int k = 0; k < record.Modes.Length; k++)
        {
            (double f, double damping, double amplitude, double phase) = record.Modes[k];
            double root = Math.Sqrt(1 - (damping * damping)), w = 2 * Math.PI * f, s = damping * w / root;
            double cos = Math.Exp(-s * t) * Math.Cos((w * t) + phase);
            double sin = Math.Exp(-s * t) * Math.Sin((w * t) + phase);
            row[2 + (4 * k)] = -amplitude * t * ((s * cos) + (w * sin));
            row[3 + (4 * k)] = -amplitude * t * s / (root * root) * cos;
            row[4 + (4 * k)] = cos;
            row[5 + (4 * k)] = -amplitude * sin;
        }
    }

    /// <summary>Gauss and Jordan, the right half receives the inverse.</summary>
    private static void Invert(double[,] a, int size)
    {
        for (int i = 0; i < size; i++)
        {
            a[i, size + i] = 1;
        }

        for (int i = 0; i < size; i++)
        {
            double pivot = a[i, i];
            for (int j = 0; j < 2 * size; j++)
            {
                a[i, j] /= pivot;
            }

            for (int other = 0; other < size; other++)
            {
                double factor = a[other, i];
                for (int j = 0; j < 2 * size && other != i; j++)
                {
                    a[other, j] -= factor * a[i, j];
                }
            }
        }
    }
}
