using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace BenchRunner.Signals.Ringing;

/// <summary>The products of all columns that a ring fit rests on, gathered in one pass over the samples.</summary>
/// <remarks>
/// Columns: 1, t, then e^(−s t) cos(w t) and e^(−s t) sin(w t) a mode, then t times these two a mode, then the samples;
/// t runs from 0 to 1 over the window. The vectors hold four different sums each, never parts of one: every sum is
/// formed sample after sample, so that the bits are those of a plain loop on any processor.
/// </remarks>
internal static class RingFitColumns
{
    /// <summary>Columns of three modes, filled up to whole vectors.</summary>
    public const int Most = 16;

    /// <summary>Samples between two exact values of the damped rotation; a recurrence fills the rest.</summary>
    private const int Block = 64;

    /// <summary>Linear unknowns c, d and two a mode.</summary>
    public static int Linear(int modes) => 2 + (2 * modes);

    /// <summary>Place of the samples' column.</summary>
    public static int Samples(int modes) => 2 + (4 * modes);

    /// <summary>Distance of the rows of the products.</summary>
    public static int Width(int modes) => (Samples(modes) + 4) / 4 * 4;

    /// <summary>Forms the products of all columns.</summary>
    /// <param name="y">Samples.</param>
    /// <param name="shape">s and w of each mode, one after the other, both times the window.</param>
    /// <param name="products">Receives the products, width², upper triangle.</param>
    public static void Multiply(ReadOnlySpan<double> y, ReadOnlySpan<double> shape, Span<double> products)
    {
        int modes = shape.Length / 2;
        int width = Width(modes);
        Span<double> rows = stackalloc double[Block * Most];
        rows.Clear();
        products[..(width * width)].Clear();
        for (int start = 0; start < y.Length; start += Block)
        {
            int count = Math.Min(Block, y.Length - start);
            Fill(y, start, count, shape, rows, width);
            for (int a = 0; a < width; a += 4)
            {
                for (int b = a; b < width; b += 4)
                {
                    Accumulate(rows, count, width, a, b, products);
                }
            }
        }
    }

    /// <summary>Forms a combination of the columns.</summary>
    /// <param name="shape">As for <see cref="Multiply"/>.</param>
    /// <param name="factors">What each column counts, from the first on; the samples' column is none of them.</param>
    /// <param name="sum">Receives the combination, one value a sample.</param>
    public static void Combine(ReadOnlySpan<double> shape, ReadOnlySpan<double> factors, Span<double> sum)
    {
        int width = Width(shape.Length / 2);
        Span<double> rows = stackalloc double[Block * Most];
        for (int start = 0; start < sum.Length; start += Block)
        {
            int count = Math.Min(Block, sum.Length - start);
            Fill(sum, start, count, shape, rows, width);
            for (int n = 0; n < count; n++)
            {
                double value = 0;
                for (int k = 0; k < factors.Length; k++)
                {
                    value += factors[k] * rows[(n * width) + k];
                }

                sum[start + n] = value;
            }
        }
    }

    private static void Fill(
        ReadOnlySpan<double> y, int start, int count, ReadOnlySpan<double> shape, Span<double> rows, int width)
    {
        int modes = shape.Length / 2;
        double step = 1.0 / y.Length;
        int samples = Samples(modes);
        for (int n = 0; n < count; n++)
        {
            Span<double> row = rows.Slice(n * width, width);
            row[0] = 1;
            row[1] = (start + n) * step;
            row[samples] = y[start + n];
        }

        for (int k = 0; k < modes; k++)
        {
            double at = start * step;
            (double sin, double cos) = Math.SinCos(shape[(2 * k) + 1] * at);
            double size = Math.Exp(-shape[2 * k] * at);
            (double re, double im) = (size * cos, size * sin);
            (sin, cos) = Math.SinCos(shape[(2 * k) + 1] * step);
            size = Math.Exp(-shape[2 * k] * step);
            (double turnRe, double turnIm) = (size * cos, size * sin);
            int direct = 2 + (2 * k), timed = direct + (2 * modes);
            for (int n = 0; n < count; n++)
            {
                Span<double> row = rows.Slice(n * width, width);
                row[direct] = re;
                row[direct + 1] = im;
                row[timed] = row[1] * re;
                row[timed + 1] = row[1] * im;
                (re, im) = ((re * turnRe) - (im * turnIm), (re * turnIm) + (im * turnRe));
            }
        }
    }

    /// <summary>Adds the products of columns a to a + 3 with columns b to b + 3.</summary>
    private static void Accumulate(ReadOnlySpan<double> rows, int count, int width, int a, int b, Span<double> products)
    {
        ref double row = ref MemoryMarshal.GetReference(rows);
        ref double sums = ref MemoryMarshal.GetReference(products);
        nuint at = (nuint)((a * width) + b);
        Vector256<double> sum0 = Vector256.LoadUnsafe(ref sums, at);
        Vector256<double> sum1 = Vector256.LoadUnsafe(ref sums, at + (nuint)width);
        Vector256<double> sum2 = Vector256.LoadUnsafe(ref sums, at + (nuint)(2 * width));
        Vector256<double> sum3 = Vector256.LoadUnsafe(ref sums, at + (nuint)(3 * width));
        for (int n = 0; n < count * width; n += width)
        {
            Vector256<double> right = Vector256.LoadUnsafe(ref row, (nuint)(n + b));
            sum0 += Vector256.Create(rows[n + a]) * right;
            sum1 += Vector256.Create(rows[n + a + 1]) * right;
            sum2 += Vector256.Create(rows[n + a + 2]) * right;
            sum3 += Vector256.Create(rows[n + a + 3]) * right;
        }

        sum0.StoreUnsafe(ref sums, at);
        sum1.StoreUnsafe(ref sums, at + (nuint)width);
        sum2.StoreUnsafe(ref sums, at + (nuint)(2 * width));
        sum3.StoreUnsafe(ref sums, at + (nuint)(3 * width));
    }
}
