namespace BenchRunner.Benchmarks;

/// <summary>The Cramér-Rao bound of a ring in white noise: no unbiased estimate scatters less.</summary>
/// <remarks>
/// Fisher's matrix of the whole model (offset, slope, amplitude, phase, decay, turn) is JᵀJ/σ², J the samples' slopes
/// by these six; its inverse bounds their covariance, and through its own slopes that of the damping ratio (S. Kay,
/// Fundamentals of Statistical Signal Processing, volume 1, chapter 3; from memory).
/// </remarks>
internal static class RingBound
{
    private const int Unknowns = 6;

    /// <summary>Least standard deviations of frequency, Hz, and of the damping ratio, 1.</summary>
    public static (double Frequency, double Damping) Of(NoisyRing ring)
    {
        double window = ring.Count * ring.Interval;
        double[,] fisher = new double[Unknowns, Unknowns];
        double[] slopes = new double[Unknowns];
        double deviation = NoisyRing.Amplitude * ring.Noise;
        for (int n = 0; n < ring.Count; n++)
        {
            // Everything in units of the window, so that the matrix is well conditioned.
            double t = (double)n / ring.Count;
            double envelope = NoisyRing.Amplitude * Math.Exp(-ring.Decay * window * t);
            (double sin, double cos) = Math.SinCos((ring.Turn * window * t) + ring.Phase);
            slopes[0] = 1;
            slopes[1] = t;
            slopes[2] = envelope * cos / NoisyRing.Amplitude;
            slopes[3] = -envelope * sin;
            slopes[4] = -t * envelope * cos;
            slopes[5] = -t * envelope * sin;
            for (int i = 0; i < Unknowns; i++)
            {
                for (int j = 0; j < Unknowns; j++)
                {
                    fisher[i, j] += slopes[i] * slopes[j] / (deviation * deviation);
                }
            }
        }

        double[,] bound = Inverse(fisher);
        (double s, double w) = (ring.Decay * window, ring.Turn * window);
        double cube = Math.Pow((s * s) + (w * w), 1.5);
        (double byDecay, double byTurn) = (w * w / cube, -s * w / cube);
        double damping = (byDecay * byDecay * bound[4, 4]) + (2 * byDecay * byTurn * bound[4, 5])
            + (byTurn * byTurn * bound[5, 5]);
        return (Math.Sqrt(bound[5, 5]) / (2 * Math.PI * window), Math.Sqrt(damping));
    }

    /// <summary>By Gauss and Jordan; the matrix is positive definite, so no row changes place.</summary>
    private static double[,] Inverse(double[,] matrix)
    {
        double[,] a = (double[,])matrix.Clone();
        double[,] inverse = new double[Unknowns, Unknowns];
        for (int i = 0; i < Unknowns; i++)
        {
            inverse[i, i] = 1;
        }

        for (int pivot = 0; pivot < Unknowns; pivot++)
        {
            double divisor = a[pivot, pivot];
            for (int j = 0; j < Unknowns; j++)
            {
                a[pivot, j] /= divisor;
                inverse[pivot, j] /= divisor;
            }

            for (int i = 0; i < Unknowns; i++)
            {
                double factor = i == pivot ? 0 : a[i, pivot];
                for (int j = 0; j < Unknowns; j++)
                {
                    a[i, j] -= factor * a[pivot, j];
                    inverse[i, j] -= factor * inverse[pivot, j];
                }
            }
        }

        return inverse;
    }
}
