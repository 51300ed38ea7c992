using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace BenchRunner.Signals.Ringing;

/// <summary>The colour of residuals: what each owes to those before it.</summary>
/// <remarks>
/// An autoregression r[n] + Σ a[k] r[n−k] = e[n] with white e, by the recursion of Levinson and Durbin on the
/// autocorrelation, its order that of the shortest description (both from memory). Wrong where the residuals are not
/// stationary, a wandering frequency's for one.
/// </remarks>
internal readonly struct RingFitNoise
{
    /// <summary>The longest memory, in samples: a probe's pole needs one, a resonance two.</summary>
    public const int Longest = 8;

    private const int SamplesPerLag = 8;

    private readonly double[] _memory;
    private readonly double _innovation;

    private RingFitNoise(double[] memory, double innovation)
    {
        _memory = memory;
        _innovation = innovation;
    }

    /// <summary>Tells the colour of residuals.</summary>
    /// <param name="residual">The residuals, behind them <see cref="Longest"/> zeros.</param>
    public static RingFitNoise Of(ReadOnlySpan<double> residual)
    {
        int samples = residual.Length - Longest;
        Span<double> products = stackalloc double[1 + Longest];
        Correlate(residual, products);
        double error = 1, shortest = 0;
        double[] best = [];
        double least = 1;
        Span<double> memory = stackalloc double[Longest];
        Span<double> turned = stackalloc double[Longest];
        for (int lag = 1; lag <= Math.Min(Longest, samples / SamplesPerLag) && products[0] > 0; lag++)
        {
            double rest = products[lag];
            for (int k = 1; k < lag; k++)
            {
                rest += memory[k - 1] * products[lag - k];
            }

            double reflection = -rest / (products[0] * error);
            if (!(Math.Abs(reflection) < 1))
            {
                break;
            }

            for (int k = 1; k < lag; k++)
            {
                turned[k - 1] = memory[k - 1] + (reflection * memory[lag - k - 1]);
            }

            turned[lag - 1] = reflection;
            turned[..lag].CopyTo(memory);
            error *= 1 - (reflection * reflection);
            double length = (samples * Math.Log(error)) + (lag * Math.Log(samples));
            if (length < shortest)
            {
                (shortest, best, least) = (length, memory[..lag].ToArray(), error);
            }
        }

        return new RingFitNoise(best, least);
    }

    /// <summary>Whether no colour was found.</summary>
    public bool IsWhite => _memory.Length == 0;

    /// <summary>Variance of a weighted sum of such noise, as a multiple of the noise's own.</summary>
    /// <param name="weights">A weight a sample, falling off towards the end; used up.</param>
    /// <remarks>The noise's covariance is the same forwards and backwards, so that the weights can be filtered as the
    /// innovations are: the sum of squares is then that of innovations, which are white.</remarks>
    public double Power(Span<double> weights)
    {
        double squares = 0;
        for (int n = 0; n < weights.Length; n++)
        {
            double value = weights[n];
            for (int k = 0; k < Math.Min(n, _memory.Length); k++)
            {
                value -= _memory[k] * weights[n - k - 1];
            }

            weights[n] = value;
            squares += value * value;
        }

        return _innovation * squares;
    }

    /// <summary>Sums of products with the samples 0 to 8 later: a lane a sum, so that the bits are those of a plain
    /// loop.</summary>
    private static void Correlate(ReadOnlySpan<double> residual, Span<double> products)
    {
        ref double first = ref MemoryMarshal.GetReference(residual);
        Vector256<double> near = Vector256<double>.Zero, far = Vector256<double>.Zero;
        double own = 0;
        for (int n = 0; n < residual.Length - Longest; n++)
        {
            Vector256<double> now = Vector256.Create(residual[n]);
            near += now * Vector256.LoadUnsafe(ref first, (nuint)(n + 1));
            far += now * Vector256.LoadUnsafe(ref first, (nuint)(n + 5));
            own += residual[n] * residual[n];
        }

        products[0] = own;
        near.CopyTo(products[1..]);
        far.CopyTo(products[5..]);
    }
}
