namespace BenchRunner.Signals.Corrections;

/// <summary>Moves a record in time by any part of a sample: six-point interpolation (Lagrange).</summary>
/// <remarks>
/// Exact for polynomials up to the fifth degree; at a fourteenth of the sampling rate (70 MHz at 1 GS/s) the largest
/// error is 4e-5 of the amplitude. Near the ends the six points lie to one side.
/// </remarks>
internal static class SkewCorrection
{
    private const int Points = 6;

    /// <summary>Moves a record to earlier times.</summary>
    /// <param name="recorded">The record.</param>
    /// <param name="late">By how many samples it is late; may be broken, negative, or larger than the record.</param>
    /// <param name="moved">Receives the record at i + <paramref name="late"/>; its end values beyond the ends.</param>
    public static void Apply(ReadOnlySpan<double> recorded, double late, Span<double> moved)
    {
        int count = recorded.Length;
        // Beyond the whole record nothing changes any more, and an integer would overflow.
        late = Math.Clamp(late, -count, count);
        int whole = (int)Math.Floor(late);
        double part = late - whole;
        int first = Math.Clamp((Points / 2) - 1 - whole, 0, count);
        int last = Math.Clamp(count - (Points / 2) - whole, first, count);
        if (part == 0)
        {
            (first, last) = (Math.Clamp(-whole, 0, count), Math.Clamp(count - whole, 0, count));
            recorded.Slice(first + whole, last - first).CopyTo(moved[first..]);
        }
        else if (last > first)
        {
            Span<double> weights = stackalloc double[Points];
            Weigh(part + (Points / 2) - 1, weights);
            Combine(recorded[(first + whole - (Points / 2) + 1)..], weights, moved[first..last]);
        }

        for (int i = 0; i < first; i++)
        {
            moved[i] = At(recorded, i + late);
        }

        for (int i = last; i < count; i++)
        {
            moved[i] = At(recorded, i + late);
        }
    }

    /// <summary>Weights of equally spaced points 0, 1, … for the value at a position (Lagrange).</summary>
    private static void Weigh(double position, Span<double> weights)
    {
        for (int i = 0; i < weights.Length; i++)
        {
            double weight = 1;
            for (int j = 0; j < weights.Length; j++)
            {
                if (j != i)
                {
                    weight *= (position - j) / (i - j);
                }
            }

            weights[i] = weight;
        }
    }

    private static void Combine(ReadOnlySpan<double> x, ReadOnlySpan<double> weights, Span<double> moved)
    {
        double w0 = weights[0], w1 = weights[1], w2 = weights[2], w3 = weights[3], w4 = weights[4], w5 = weights[5];
        x = x[..(moved.Length + Points - 1)];
        for (int i = 0; i < moved.Length; i++)
        {
            moved[i] = (w0 * x[i]) + (w1 * x[i + 1]) + (w2 * x[i + 2]) + (w3 * x[i + 3]) + (w4 * x[i + 4])
                + (w5 * x[i + 5]);
        }
    }

    /// <summary>The record at a position, from the nearest six points that it has (or all, if fewer).</summary>
    public static double At(ReadOnlySpan<double> recorded, double position)
    {
        if (position <= 0 || position >= recorded.Length - 1)
        {
            return position <= 0 ? recorded[0] : recorded[^1];
        }

        int points = Math.Min(Points, recorded.Length);
        int start = Math.Clamp((int)Math.Floor(position) - (points / 2) + 1, 0, recorded.Length - points);
        Span<double> weights = stackalloc double[points];
        Weigh(position - start, weights);
        double value = 0;
        for (int i = 0; i < points; i++)
        {
            value += weights[i] * recorded[start + i];
        }

        return value;
    }
}
