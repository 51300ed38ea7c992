namespace BenchRunner.Signals.Fitting;

/// <summary>Symmetric systems of a handful of unknowns in plain ordered loops: the same bits on every run.</summary>
public static class Cholesky
{
    /// <summary>Factors a symmetric positive definite matrix A = L Lᵀ in place, lower triangle, row by row.</summary>
    /// <param name="a">A, <paramref name="size"/>²; its lower triangle becomes L.</param>
    /// <param name="size">Rows.</param>
    /// <returns>False where A is not positive definite within rounding.</returns>
    public static bool Factor(Span<double> a, int size)
    {
        for (int i = 0; i < size; i++)
        {
            double diagonal = a[(i * size) + i];
            for (int j = 0; j <= i; j++)
            {
                double sum = a[(i * size) + j];
                for (int k = 0; k < j; k++)
                {
                    sum -= a[(i * size) + k] * a[(j * size) + k];
                }

                if (j < i)
                {
                    a[(i * size) + j] = sum / a[(j * size) + j];
                }
                else if (sum > 1e-15 * diagonal)
                {
                    a[(i * size) + i] = Math.Sqrt(sum);
                }
                else
                {
                    return false;
                }
            }
        }

        return true;
    }

    /// <summary>Solves L x = b in place.</summary>
    public static void Forward(ReadOnlySpan<double> factor, int size, Span<double> b)
    {
        for (int i = 0; i < size; i++)
        {
            double sum = b[i];
            for (int k = 0; k < i; k++)
            {
                sum -= factor[(i * size) + k] * b[k];
            }

            b[i] = sum / factor[(i * size) + i];
        }
    }

    /// <summary>Solves Lᵀ x = b in place.</summary>
    public static void Backward(ReadOnlySpan<double> factor, int size, Span<double> b)
    {
        for (int i = size - 1; i >= 0; i--)
        {
            double sum = b[i];
            for (int k = i + 1; k < size; k++)
            {
                sum -= factor[(k * size) + i] * b[k];
            }

            b[i] = sum / factor[(i * size) + i];
        }
    }

    /// <summary>Inverts a symmetric positive definite matrix, its unknowns first brought to one scale.</summary>
    /// <param name="a">A, <paramref name="size"/>²; its lower triangle is used up.</param>
    /// <param name="size">Rows.</param>
    /// <param name="inverse">Receives the inverse, <paramref name="size"/>².</param>
    /// <returns>False where A is not positive definite within rounding: its unknowns cannot be told apart.</returns>
    public static bool Invert(Span<double> a, int size, Span<double> inverse)
    {
        Span<double> scale = stackalloc double[size];
        for (int i = 0; i < size; i++)
        {
            scale[i] = 1 / Math.Sqrt(a[(i * size) + i]);
            for (int j = 0; j <= i; j++)
            {
                a[(i * size) + j] *= scale[i] * scale[j];
            }
        }

        if (!Factor(a, size))
        {
            return false;
        }

        for (int i = 0; i < size; i++)
        {
            Span<double> column = inverse.Slice(i * size, size);
            column.Clear();
            column[i] = 1;
            Forward(a, size, column);
            Backward(a, size, column);
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
}
