using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace FakeBench.Probes;

/// <summary>Delay and one-pole low pass of a uniformly sampled signal, both exact for a cubic through four
/// samples.</summary>
public static class Lowpass
{
    /// <summary>Delays a signal by any time; beyond the ends it keeps its first and last value.</summary>
    /// <param name="samples">The signal.</param>
    /// <param name="delay">In samples; negative: earlier.</param>
    /// <param name="result">Receives the delayed signal; as long as the samples, and not the same memory.</param>
    public static void Delay(ReadOnlySpan<double> samples, double delay, Span<double> result)
    {
        if (delay == 0)
        {
            samples.CopyTo(result);
            return;
        }

        double floor = Math.Floor(-delay);
        double s = -delay - floor;
        int shift = (int)Math.Clamp(floor, -samples.Length - 4, samples.Length + 4);
        double a = -s * (s - 1) * (s - 2) / 6, b = (s + 1) * (s - 1) * (s - 2) / 2;
        double c = -(s + 1) * s * (s - 2) / 2, d = (s + 1) * s * (s - 1) / 6;
        int first = Math.Clamp(1 - shift, 0, result.Length);
        int inside = Math.Max(0, Math.Min(result.Length, samples.Length - 2 - shift) - first);
        var to = Wide(result.Slice(first, inside));
        if (to.Length > 0)
        {
            var before = samples[(first + shift - 1)..];
            ReadOnlySpan<Vector256<double>> y0 = Wide(before), y1 = Wide(before[1..]);
            ReadOnlySpan<Vector256<double>> y2 = Wide(before[2..]), y3 = Wide(before[3..]);
            for (int k = 0; k < to.Length; k++) to[k] = a * y0[k] + b * y1[k] + c * y2[k] + d * y3[k];
        }

        int done = first + Vector256<double>.Count * to.Length;
        for (int i = 0; i < first; i++) result[i] = AtEnds(samples, i + shift);
        for (int i = done; i < result.Length; i++) result[i] = AtEnds(samples, i + shift);

        double AtEnds(ReadOnlySpan<double> y, int at) =>
            a * Held(y, at - 1) + b * Held(y, at) + c * Held(y, at + 1) + d * Held(y, at + 2);
    }

    /// <summary>Filters in place; the signal was at its first value for ever before.</summary>
    /// <param name="samples">Changed in place.</param>
    /// <param name="ratio">Sample interval over the filter's time constant; 0 or infinite: no filter.</param>
    public static void Filter(Span<double> samples, double ratio)
    {
        if (samples.Length < 2 || ratio == 0 || double.IsInfinity(ratio)) return;
        var (keep, w0, w1, w2, w3) = Weights(ratio);
        double before = samples[0], now = samples[0], output = samples[0];
        for (int i = 0; i + 1 < samples.Length; i++)
        {
            double next = samples[i + 1];
            double later = i + 2 < samples.Length ? samples[i + 2] : next;
            // One fused operation is all that waits for the sample before.
            output = Math.FusedMultiplyAdd(keep, output, w0 * before + w1 * now + w2 * next + w3 * later);
            (before, now) = (now, next);
            samples[i + 1] = output;
        }
    }

    /// <summary>Weights of the four samples around one interval: the filter's answer to Lagrange's cubic.</summary>
    private static (double Keep, double W0, double W1, double W2, double W3) Weights(double r)
    {
        // m[k]: r times the integral over the interval of s^k exp(-r (1 - s)), s from 0 to 1, by parts.
        double keep = Math.Exp(-r);
        Span<double> m = stackalloc double[4];
        m[0] = 1 - keep;
        for (int k = 1; k < 4; k++) m[k] = r < 0.1 ? Series(k, r) : 1 - k / r * m[k - 1];
        return (keep,
            (-m[3] + 3 * m[2] - 2 * m[1]) / 6,
            (m[3] - 2 * m[2] - m[1] + 2 * m[0]) / 2,
            (-m[3] + m[2] + 2 * m[1]) / 2,
            (m[3] - m[1]) / 6);
    }

    /// <summary>The same integral where the recursion would cancel: sum of (-r)^n k!/(k + n + 1)! times r.</summary>
    private static double Series(int k, double r)
    {
        double term = r / (k + 1);
        double sum = term;
        for (int n = 1; n < 12; n++)
        {
            term *= -r / (k + n + 1);
            sum += term;
        }

        return sum;
    }

    private static double Held(ReadOnlySpan<double> samples, int at) => samples[Math.Clamp(at, 0, samples.Length - 1)];

    private static Span<Vector256<double>> Wide(Span<double> row) =>
        MemoryMarshal.Cast<double, Vector256<double>>(row);

    private static ReadOnlySpan<Vector256<double>> Wide(ReadOnlySpan<double> row) =>
        MemoryMarshal.Cast<double, Vector256<double>>(row);
}
