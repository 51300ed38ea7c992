namespace BenchRunner.Signals.Ringing;

/// <summary>Linear algebra of a handful of unknowns in plain ordered loops: the same bits on every run.</summary>
internal static class RingFitAlgebra
{
    private const int RootPasses = 60;
    private const double RootTolerance = 1e-14;

    /// <summary>Coefficients of det(λ I − A) below the leading 1, by Faddeev and LeVerrier.</summary>
    /// <param name="a">A, <paramref name="size"/>².</param>
    /// <param name="size">Rows, at most 8.</param>
    /// <param name="coefficients">Receives the coefficient of λ^i at i, for i below <paramref name="size"/>.</param>
    public static void Characteristic(ReadOnlySpan<double> a, int size, Span<double> coefficients)
    {
        Span<double> m = stackalloc double[size * size];
        Span<double> product = stackalloc double[size * size];
        m.Clear();
        double last = 1;
        for (int step = 1; step <= size; step++)
        {
            for (int i = 0; i < size; i++)
            {
                m[(i * size) + i] += last;
            }

            double trace = 0;
            for (int i = 0; i < size; i++)
            {
                for (int j = 0; j < size; j++)
                {
                    double sum = 0;
                    for (int k = 0; k < size; k++)
                    {
                        sum += a[(i * size) + k] * m[(k * size) + j];
                    }

                    product[(i * size) + j] = sum;
                }

                trace += product[(i * size) + i];
            }

            last = -trace / step;
            coefficients[size - step] = last;
            product.CopyTo(m);
        }
    }

    /// <summary>All roots of a monic polynomial at once, by Durand and Kerner.</summary>
    /// <param name="coefficients">Coefficient of z^i at i, the leading 1 left out.</param>
    /// <param name="real">Receives the real parts.</param>
    /// <param name="imaginary">Receives the imaginary parts.</param>
    public static void Roots(ReadOnlySpan<double> coefficients, Span<double> real, Span<double> imaginary)
    {
        int degree = coefficients.Length;
        for (int i = 0; i < degree; i++)
        {
            // On a circle a little inside the unit circle, off the real axis so that no root is its own mirror image.
            (imaginary[i], real[i]) = Math.SinCos((2 * Math.PI * i / degree) + 0.4);
            real[i] *= 0.9;
            imaginary[i] *= 0.9;
        }

        for (int pass = 0; pass < RootPasses; pass++)
        {
            double largest = 0;
            for (int i = 0; i < degree; i++)
            {
                largest = Math.Max(largest, Improve(coefficients, real, imaginary, i));
            }

            if (!(largest > RootTolerance))
            {
                return;
            }
        }
    }

    private static double Improve(ReadOnlySpan<double> coefficients, Span<double> real, Span<double> imaginary, int i)
    {
        (double x, double y) = (real[i], imaginary[i]);
        (double valueRe, double valueIm) = (1, 0);
        for (int k = coefficients.Length - 1; k >= 0; k--)
        {
            (valueRe, valueIm) = ((valueRe * x) - (valueIm * y) + coefficients[k], (valueRe * y) + (valueIm * x));
        }

        (double otherRe, double otherIm) = (1, 0);
        for (int j = 0; j < coefficients.Length; j++)
        {
            if (j != i)
            {
                (double dx, double dy) = (x - real[j], y - imaginary[j]);
                (otherRe, otherIm) = ((otherRe * dx) - (otherIm * dy), (otherRe * dy) + (otherIm * dx));
            }
        }

        double norm = (otherRe * otherRe) + (otherIm * otherIm);
        if (!(norm > 0))
        {
            return 0;
        }

        double stepRe = ((valueRe * otherRe) + (valueIm * otherIm)) / norm;
        double stepIm = ((valueIm * otherRe) - (valueRe * otherIm)) / norm;
        real[i] = x - stepRe;
        imaginary[i] = y - stepIm;
        return Math.Abs(stepRe) + Math.Abs(stepIm);
    }
}
