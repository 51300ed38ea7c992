using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Peaks;

/// <summary>The top of a signal: definitions <c>peak/raw</c>, <c>peak/above-load</c> and
/// <c>peak/parabola-20</c>.</summary>
/// <param name="Height">The maximum, in the signal's unit.</param>
/// <param name="Position">Where it lies, in samples.</param>
/// <param name="Sample">The highest sample.</param>
public readonly record struct Peak(double Height, double Position, int Sample)
{
    private const double TopPart = 0.8;

    /// <summary>The maximum: the vertex of the parabola through the highest sample and its neighbours.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="from">First position, in samples.</param>
    /// <param name="to">Last position, in samples.</param>
    /// <returns>The peak; null where the highest sample has no neighbour on both sides inside the interval: the signal
    /// then still rises or already falls at its end.</returns>
    /// <exception cref="ArgumentException">A sample of the interval is NaN or infinite.</exception>
    /// <remarks>y0 + (y₊ − y₋)² / (8 (2 y0 − y₋ − y₊)), at (y₊ − y₋) / (2 (2 y0 − y₋ − y₊)) samples after the highest.
    /// Of equal samples the first. A corner costs up to dt/8 times the difference of its slopes; noise only ever
    /// adds.</remarks>
    /// <example>1.0, 3.0, 2.5 peak at 3.1125, 0.3 samples after the middle one.</example>
    public static Peak? Raw(ReadOnlySpan<double> samples, double from, double to)
    {
        int first = Math.Max(0, (int)Math.Ceiling(Math.Min(from, samples.Length)));
        int last = (int)Math.Min(samples.Length - 1, Math.Floor(to));
        if (last > first)
        {
            Finite.Require(samples[first..(last + 1)], nameof(samples));
        }

        int top = first;
        for (int i = first + 1; i <= last; i++)
        {
            top = samples[i] > samples[top] ? i : top;
        }

        return top > first && top < last ? Vertex(samples, top) : null;
    }

    /// <summary>The vertex of the parabola through a sample, not lower than its neighbours, and its
    /// neighbours.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="top">The sample; it has a neighbour on both sides.</param>
    /// <returns>The peak; the sample itself where the three lie on a line.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The sample has no neighbour on a side.</exception>
    /// <exception cref="ArgumentException">One of the three is NaN or infinite.</exception>
    public static Peak Vertex(ReadOnlySpan<double> samples, int top)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(top, 1);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(top, samples.Length - 2);
        Finite.Require(samples[(top - 1)..(top + 2)], nameof(samples));
        double difference = samples[top + 1] - samples[top - 1];
        double bend = (samples[top] - samples[top - 1]) + (samples[top] - samples[top + 1]);
        return bend > 0
            ? new Peak(samples[top] + (difference * difference / (8 * bend)), top + (difference / (2 * bend)), top)
            : new Peak(samples[top], top, top);
    }

    /// <summary>The vertex of a least-squares parabola over the top fifth of the peak, for noisy records.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="from">First position, in samples.</param>
    /// <param name="to">Last position, in samples.</param>
    /// <param name="base">What the peak stands on, in the signal's unit.</param>
    /// <returns>The height over the run of samples that was fitted; a reason where fewer than three samples lie in the
    /// top fifth or the parabola has no maximum among them.</returns>
    /// <exception cref="ArgumentException">A sample of the interval is NaN or infinite.</exception>
    /// <remarks>The run is the unbroken one around the highest sample above base + 80 % of (highest − base). For σ
    /// above 0.2 % of the peak; a narrow peak is flattened by it.</remarks>
    public static Reading TopFifth(ReadOnlySpan<double> samples, double from, double to, double @base)
    {
        if (Raw(samples, from, to) is not { } raw)
        {
            return Reading.None("no maximum inside the window");
        }

        int low = raw.Sample;
        int high = raw.Sample;
        double above = @base + (TopPart * (samples[raw.Sample] - @base));
        while (low - 1 >= from && low > 0 && samples[low - 1] > above)
        {
            low--;
        }

        while (high + 1 <= to && high < samples.Length - 1 && samples[high + 1] > above)
        {
            high++;
        }

        if (high - low < 2)
        {
            return Reading.None("fewer than three samples in the top 20 %");
        }

        return Parabola(samples[low..(high + 1)], out double height, out _)
            ? Reading.Of(height, low, high)
            : Reading.None("the parabola over the top 20 % has no maximum");
    }

    /// <summary>Least-squares parabola through a run; false where its vertex is no maximum inside the run.</summary>
    /// <param name="run">At least three samples.</param>
    /// <param name="height">Height of the vertex.</param>
    /// <param name="position">Position of the vertex, in samples of the run.</param>
    /// <returns>Whether height and position are those of a maximum.</returns>
    /// <exception cref="ArgumentException">Fewer than three samples, or one that is NaN or infinite.</exception>
    public static bool Parabola(ReadOnlySpan<double> run, out double height, out double position)
    {
        if (run.Length < 3)
        {
            throw new ArgumentException("A parabola needs three samples.", nameof(run));
        }

        Finite.Require(run, nameof(run));
        // Orthogonal polynomials 1, u, u² − m on a centred uniform grid: no matrix to invert.
        double n = run.Length;
        double half = (n - 1) / 2;
        double m = ((n * n) - 1) / 12;
        double s0 = 0;
        double s1 = 0;
        double s2 = 0;
        for (int i = 0; i < run.Length; i++)
        {
            double u = i - half;
            s0 += run[i];
            s1 += run[i] * u;
            s2 += run[i] * ((u * u) - m);
        }

        double c0 = s0 / n;
        double c1 = s1 / (n * m);
        double c2 = s2 / (n * ((n * n) - 1) * ((n * n) - 4) / 180);
        double vertex = -c1 / (2 * c2);
        position = half + vertex;
        height = c0 - (c2 * m) - (c1 * c1 / (4 * c2));
        return c2 < 0 && Math.Abs(vertex) <= half;
    }
}
