using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace BenchRunner.Signals.Ringing;

/// <summary>Start values of a ring fit by a subspace method (ESPRIT): frequencies and decays, no amplitudes.</summary>
/// <remarks>
/// Rows x[n + i D] of a decaying oscillation are combinations of z^(i D), whatever n: the leading eigenvectors of
/// their correlation span that space, and shifting the rows by one turns it by the poles z^D. A constant and a slope
/// are taken out of each row along n, which leaves the dependence on i, and so the poles, as they are. Source: Roy and
/// Kailath, ESPRIT, 1989 (from memory).
/// </remarks>
internal ref struct RingFitStart
{
    /// <summary>Rows of the correlation; more resolve closer modes, and cost their square.</summary>
    private const int MostRows = 40;

    /// <summary>Vectors iterated: six for three modes, two more so that the sixth settles quickly.</summary>
    private const int Vectors = 8;

    private const int Passes = 8;

    private readonly Span<double> _vectors;
    private readonly int _rows;
    private readonly int _stride;

    /// <summary>Finds the dominant subspace of a record.</summary>
    /// <param name="x">Samples, their trend removed; at least 24.</param>
    /// <param name="vectors">Scratch of <see cref="ScratchLength"/>, kept as long as this value is used.</param>
    public RingFitStart(ReadOnlySpan<double> x, Span<double> vectors)
    {
        int most = Math.Min(MostRows, x.Length / 2);
        _stride = RingFitCorrelation.Stride(x, Math.Max(1, x.Length / 2 / (most - 1)));
        _rows = most;
        _vectors = vectors[..(_rows * Vectors)];

        Span<double> correlation = stackalloc double[MostRows * MostRows];
        correlation = correlation[..(_rows * _rows)];
        RingFitCorrelation.Form(x, _stride, _rows, correlation);
        Iterate(correlation);
    }

    /// <summary>Doubles of scratch needed.</summary>
    public static int ScratchLength => MostRows * Vectors;

    /// <summary>Writes start values for a number of modes.</summary>
    /// <param name="modes">Modes wanted, 1 to 3.</param>
    /// <param name="decay">Receives σ a sample.</param>
    /// <param name="turn">Receives ω a sample, rad; 0 for a bare decay, which may stand in for the last mode.</param>
    /// <returns>Whether the subspace holds that many.</returns>
    public readonly bool Modes(int modes, Span<double> decay, Span<double> turn)
    {
        if (2 * modes > _rows - 2)
        {
            return false;
        }

        // A bare decay takes one pole where an oscillation takes two.
        return Poles(2 * modes, decay, turn, out _) >= modes
            || (Poles((2 * modes) - 1, decay, turn, out bool decays) == modes - 1 && decays);
    }

    /// <summary>Writes the oscillating poles, behind them the slowest bare decay; returns how many oscillate.</summary>
    private readonly int Poles(int poles, Span<double> decay, Span<double> turn, out bool decays)
    {
        const double OnRealAxis = 1e-7;
        decays = false;
        Span<double> shift = stackalloc double[poles * poles];
        if (!Shift(poles, shift))
        {
            return 0;
        }

        Span<double> coefficients = stackalloc double[poles];
        Span<double> real = stackalloc double[poles];
        Span<double> imaginary = stackalloc double[poles];
        RingFitAlgebra.Characteristic(shift, poles, coefficients);
        RingFitAlgebra.Roots(coefficients, real, imaginary);
        int found = 0;
        double slowest = 0;
        for (int i = 0; i < poles; i++)
        {
            double size = Math.Sqrt((real[i] * real[i]) + (imaginary[i] * imaginary[i]));
            if (imaginary[i] > OnRealAxis && size > 1e-6)
            {
                decay[found] = -Math.Log(size) / _stride;
                turn[found++] = Math.Atan2(imaginary[i], real[i]) / _stride;
            }
            else if (Math.Abs(imaginary[i]) <= OnRealAxis && real[i] > slowest)
            {
                slowest = real[i];
            }
        }

        if (slowest > 1e-6 && found < decay.Length)
        {
            decays = true;
            decay[found] = -Math.Log(slowest) / _stride;
            turn[found] = 0;
        }

        return found;
    }

    /// <summary>Orthogonal iteration towards the dominant eigenvectors, all vectors side by side.</summary>
    private readonly void Iterate(ReadOnlySpan<double> r)
    {
        Span<double> next = stackalloc double[MostRows * Vectors];
        next = next[..(_rows * Vectors)];
        _vectors.Clear();
        for (int v = 0; v < Vectors; v++)
        {
            _vectors[((v * _rows / Vectors) * Vectors) + v] = 1;
        }

        for (int pass = 0; pass < Passes; pass++)
        {
            ref double source = ref MemoryMarshal.GetReference(_vectors);
            ref double target = ref MemoryMarshal.GetReference(next);
            for (int i = 0; i < _rows; i++)
            {
                Vector256<double> low = Vector256<double>.Zero;
                Vector256<double> high = Vector256<double>.Zero;
                for (int j = 0; j < _rows; j++)
                {
                    Vector256<double> factor = Vector256.Create(r[(i * _rows) + j]);
                    low += factor * Vector256.LoadUnsafe(ref source, (nuint)(j * Vectors));
                    high += factor * Vector256.LoadUnsafe(ref source, (nuint)((j * Vectors) + 4));
                }

                low.StoreUnsafe(ref target, (nuint)(i * Vectors));
                high.StoreUnsafe(ref target, (nuint)((i * Vectors) + 4));
            }

            Orthonormalise(next);
            next.CopyTo(_vectors);
        }
    }

    private static void Orthonormalise(Span<double> v)
    {
        for (int a = 0; a < Vectors; a++)
        {
            for (int b = 0; b < a; b++)
            {
                double dot = Dot(v, a, b);
                for (int i = 0; i < v.Length; i += Vectors)
                {
                    v[i + a] -= dot * v[i + b];
                }
            }

            double norm = Math.Sqrt(Dot(v, a, a));
            // A vector that vanishes (fewer components than vectors) stays zero and adds no pole.
            double scale = norm > 0 ? 1 / norm : 0;
            for (int i = 0; i < v.Length; i += Vectors)
            {
                v[i + a] *= scale;
            }
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static double Dot(ReadOnlySpan<double> v, int a, int b)
    {
        double sum = 0;
        for (int i = 0; i < v.Length; i += Vectors)
        {
            sum += v[i + a] * v[i + b];
        }

        return sum;
    }

    /// <summary>The matrix Φ of U₁ Φ = U₂ in the least-squares sense: its eigenvalues are the poles.</summary>
    /// <remarks>U is orthonormal: U₁ᵀU₁ = I − u uᵀ with u its last row, its inverse I + u uᵀ/(1 − uᵀu).</remarks>
    private readonly bool Shift(int poles, Span<double> shift)
    {
        ReadOnlySpan<double> last = _vectors.Slice((_rows - 1) * Vectors, poles);
        double norm = 0;
        foreach (double value in last)
        {
            norm += value * value;
        }

        if (!(norm < 1 - 1e-9))
        {
            return false;
        }

        Span<double> column = stackalloc double[Vectors];
        for (int b = 0; b < poles; b++)
        {
            double along = 0;
            for (int a = 0; a < poles; a++)
            {
                double sum = 0;
                for (int i = 0; i < _rows - 1; i++)
                {
                    sum += _vectors[(i * Vectors) + a] * _vectors[((i + 1) * Vectors) + b];
                }

                column[a] = sum;
                along += last[a] * sum;
            }

            for (int a = 0; a < poles; a++)
            {
                shift[(a * poles) + b] = column[a] + (last[a] * along / (1 - norm));
            }
        }

        return true;
    }
}
