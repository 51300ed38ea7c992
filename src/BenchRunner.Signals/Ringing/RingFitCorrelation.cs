namespace BenchRunner.Signals.Ringing;

/// <summary>The correlation matrix of a record with itself at equal distances, for the ring's start.</summary>
internal static class RingFitCorrelation
{
    /// <summary>
    /// Distance D of the rows: an eighth of the dominant period, from the first zero of the autocorrelation (noise
    /// counts at lag 0 alone). The lags grow by at most half, so that the negative half wave cannot be stepped over.
    /// </summary>
    public static int Stride(ReadOnlySpan<double> x, int most)
    {
        for (int lag = 1; lag / 2 < most; lag += Math.Max(1, lag / 2))
        {
            double sum = 0;
            for (int n = 0; n + lag < x.Length; n++)
            {
                sum += x[n] * x[n + lag];
            }

            if (sum <= 0)
            {
                return Math.Clamp(lag / 2, 1, most);
            }
        }

        return most;
    }

    /// <summary>Correlation of the rows, their trend removed.</summary>
    /// <param name="x">Samples.</param>
    /// <param name="stride">Distance of the rows.</param>
    /// <param name="rows">Rows.</param>
    /// <param name="r">Receives the matrix, rows².</param>
    public static void Form(ReadOnlySpan<double> x, int stride, int rows, Span<double> r)
    {
        int length = x.Length - ((rows - 1) * stride);
        for (int j = 0; j < rows; j++)
        {
            ReadOnlySpan<double> late = x.Slice(j * stride, length);
            ReadOnlySpan<double> early = x[..length];
            // Four sums side by side: one alone waits for its own last addition.
            double s0 = 0, s1 = 0, s2 = 0, s3 = 0;
            int n = 0;
            for (; n + 3 < early.Length && n + 3 < late.Length; n += 4)
            {
                s0 += early[n] * late[n];
                s1 += early[n + 1] * late[n + 1];
                s2 += early[n + 2] * late[n + 2];
                s3 += early[n + 3] * late[n + 3];
            }

            for (; n < length; n++)
            {
                s0 += early[n] * late[n];
            }

            r[j] = s0 + s1 + s2 + s3;
        }

        for (int i = 1; i < rows; i++)
        {
            for (int j = i; j < rows; j++)
            {
                double sum = r[((i - 1) * rows) + j - 1];
                int a = (i - 1) * stride, b = (j - 1) * stride;
                for (int d = 0; d < stride; d++)
                {
                    sum += (x[a + length + d] * x[b + length + d]) - (x[a + d] * x[b + d]);
                }

                r[(i * rows) + j] = sum;
            }
        }

        RemoveTrend(x, stride, rows, r);
    }

    /// <summary>Takes a constant and a slope along n out of every row, in the correlation itself.</summary>
    private static void RemoveTrend(ReadOnlySpan<double> x, int stride, int rows, Span<double> r)
    {
        int length = x.Length - ((rows - 1) * stride);
        double centre = (length - 1) / 2.0;
        double slopes = (length * ((double)length * length - 1)) / 12;
        Span<double> mean = stackalloc double[rows];
        Span<double> slope = stackalloc double[rows];
        double m = 0, s = 0;
        for (int n = 0; n < length; n++)
        {
            m += x[n];
            s += (n - centre) * x[n];
        }

        for (int i = 0; i < rows; i++)
        {
            (mean[i], slope[i]) = (m, s);
            for (int d = 0; d < stride && i + 1 < rows; d++)
            {
                int at = (i * stride) + d;
                // The window moves on by one sample: its first leaves, one joins, all weights fall by 1.
                s += (centre * x[at]) + ((length - 1 - centre) * x[at + length]) - (m - x[at]);
                m += x[at + length] - x[at];
            }
        }

        for (int i = 0; i < rows; i++)
        {
            for (int j = i; j < rows; j++)
            {
                double value = r[(i * rows) + j] - (mean[i] * mean[j] / length) - (slope[i] * slope[j] / slopes);
                r[(i * rows) + j] = value;
                r[(j * rows) + i] = value;
            }
        }
    }
}
