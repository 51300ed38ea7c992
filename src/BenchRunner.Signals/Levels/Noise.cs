using System.Buffers;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Levels;

/// <summary>The noise of a channel: σ of a flat part, robust against edges inside it.</summary>
public static class Noise
{
    // Makes the median of absolute deviations of a normal distribution its standard deviation (1/Φ⁻¹(3/4)).
    private const double NormalConsistency = 1.4826;

    // Differences of codes that are counted one by one; a larger median difference is no noise of an ADC.
    private const int Reach = 1000;

    /// <summary>Standard deviation of white noise on a signal that is otherwise slow.</summary>
    /// <param name="samples">The signal, uniform, finite.</param>
    /// <param name="step">Smallest step of the record (LSB), in the signal's unit; 0: not known.</param>
    /// <param name="stride">Takes each stride-th difference; 1: all.</param>
    /// <returns>σ in the signal's unit, at least LSB/√12; that floor alone for fewer than three samples.</returns>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    /// <exception cref="ArgumentOutOfRangeException">The stride is below 1.</exception>
    /// <remarks>
    /// σ = 1.4826 · MAD(x[i+1] − x[i]) / √2. First differences take out level and slope, the median takes out edges.
    /// The floor is needed because codes of 8 bits repeat, and the MAD of mostly equal codes is zero. Noise that is not
    /// white up to the sample rate (a bandwidth-limited probe) comes out too small.
    /// </remarks>
    public static double Sigma(ReadOnlySpan<double> samples, double step, int stride = 1) =>
        Sigma(new Samples(samples), step, stride);

    /// <inheritdoc cref="Sigma(ReadOnlySpan{double}, double, int)"/>
    public static double Sigma(Samples samples, double step, int stride = 1)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(stride, 1);
        Finite.Require(samples, 0, samples.Length - 1, nameof(samples));
        double floor = step / Math.Sqrt(12);
        int count = (samples.Length - 2 + stride) / stride;
        if (samples.Length < 3)
        {
            return floor;
        }

        double deviation = samples.HasCodes && CodeDeviation(samples.Codes, count, stride) is { } codes
            ? codes * Math.Abs(samples.Gain)
            : Deviation(samples.Values, count, stride);
        return Math.Max(NormalConsistency * deviation / Math.Sqrt(2), floor);
    }

    /// <summary>Median absolute deviation of the differences.</summary>
    private static double Deviation(ReadOnlySpan<double> samples, int count, int stride)
    {
        double[] rented = ArrayPool<double>.Shared.Rent(count);
        Span<double> work = rented.AsSpan(0, count);
        for (int i = 0; i < count; i++)
        {
            work[i] = samples[(i * stride) + 1] - samples[i * stride];
        }

        double centre = Median.OfFinite(work);
        for (int i = 0; i < count; i++)
        {
            work[i] = Math.Abs(work[i] - centre);
        }

        double deviation = Median.OfFinite(work);
        ArrayPool<double>.Shared.Return(rented);
        return deviation;
    }

    /// <summary>The same of codes, by counting; null where noise is beyond all counting, and edges are everywhere.
    /// </summary>
    private static double? CodeDeviation(ReadOnlySpan<short> codes, int count, int stride)
    {
        Span<int> counts = stackalloc int[(2 * Reach) + 1];
        counts.Clear();
        int below = 0;
        for (int i = 0; i < count; i++)
        {
            int difference = codes[(i * stride) + 1] - codes[i * stride];
            if ((uint)(difference + Reach) <= 2 * Reach)
            {
                counts[difference + Reach]++;
            }
            else if (difference < 0)
            {
                below++;
            }
        }

        int middle = count / 2;
        int even = 1 - (count % 2);
        if (At(counts, middle - below) is not { } upper || At(counts, middle - even - below) is not { } lower)
        {
            return null;
        }

        // Distances from the median in half codes: the mean of two codes may lie between them.
        int centre = upper + lower - (2 * Reach);
        Span<int> distances = stackalloc int[(2 * Reach) - Math.Abs(centre) + 1];
        distances.Clear();
        for (int i = 0; i < counts.Length; i++)
        {
            int distance = Math.Abs((2 * (i - Reach)) - centre);
            if (distance < distances.Length)
            {
                distances[distance] += counts[i];
            }
        }

        return At(distances, middle) is { } far && At(distances, middle - even) is { } near ? (far + near) / 4.0 : null;
    }

    /// <summary>The index at a rank; null where the table does not hold it.</summary>
    private static int? At(ReadOnlySpan<int> counts, int rank)
    {
        for (int i = 0; rank >= 0 && i < counts.Length; i++)
        {
            rank -= counts[i];
            if (rank < 0)
            {
                return i;
            }
        }

        return null;
    }
}
