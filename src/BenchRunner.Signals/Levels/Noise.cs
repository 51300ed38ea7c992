using System.Buffers;

namespace BenchRunner.Signals.Levels;

/// <summary>The noise of a channel: σ of a flat part, robust against edges inside it.</summary>
public static class Noise
{
    // Makes the median of absolute deviations of a normal distribution its standard deviation (1/Φ⁻¹(3/4)).
    private const double NormalConsistency = 1.4826;

    /// <summary>Standard deviation of white noise on a signal that is otherwise slow.</summary>
    /// <param name="samples">The signal, uniform, finite.</param>
    /// <param name="step">Smallest step of the record (LSB), in the signal's unit; 0: not known.</param>
    /// <param name="stride">Takes each stride-th difference; 1: all.</param>
    /// <returns>σ in the signal's unit, at least LSB/√12; that floor alone for fewer than three samples.</returns>
    /// <remarks>
    /// σ = 1.4826 · MAD(x[i+1] − x[i]) / √2. First differences take out level and slope, the median takes out edges.
    /// The floor is needed because codes of 8 bits repeat, and the MAD of mostly equal codes is zero. Noise that is not
    /// white up to the sample rate (a bandwidth-limited probe) comes out too small.
    /// </remarks>
    public static double Sigma(ReadOnlySpan<double> samples, double step, int stride = 1)
    {
        double floor = step / Math.Sqrt(12);
        int count = (samples.Length - 2 + stride) / stride;
        if (samples.Length < 3)
        {
            return floor;
        }

        double[] rented = ArrayPool<double>.Shared.Rent(count);
        Span<double> work = rented.AsSpan(0, count);
        for (int i = 0; i < count; i++)
        {
            work[i] = samples[(i * stride) + 1] - samples[i * stride];
        }

        double centre = Median.Of(work);
        for (int i = 0; i < count; i++)
        {
            work[i] = Math.Abs(work[i] - centre);
        }

        double sigma = NormalConsistency * Median.Of(work) / Math.Sqrt(2);
        ArrayPool<double>.Shared.Return(rented);
        return Math.Max(sigma, floor);
    }
}
