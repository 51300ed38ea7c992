using System.Text.Json;

namespace BenchRunner.Signals.Tests.ClosedForm;

/// <summary>A uniform time grid, and analytic waveforms sampled on it.</summary>
internal sealed record Grid(double Start, double End, double Interval)
{
    public int Count { get; } = (int)Math.Round((End - Start) / Interval) + 1;

    /// <summary>Position of a time, in samples.</summary>
    public double At(double time) => (time - Start) / Interval;

    /// <summary>Time of a position, s.</summary>
    public double Time(double position) => Start + (position * Interval);

    public double[] Sample(Func<double, double> of)
    {
        double[] samples = new double[Count];
        for (int i = 0; i < samples.Length; i++)
        {
            samples[i] = of(Start + (i * Interval));
        }

        return samples;
    }

    /// <summary>A piecewise-linear channel: [time, value] pairs, constant outside; late by a shift.</summary>
    public double[] Lines(JsonElement points, double shift = 0)
    {
        double[] t = [.. points.EnumerateArray().Select(p => p[0].GetDouble() + shift)];
        double[] v = [.. points.EnumerateArray().Select(p => p[1].GetDouble())];
        int k = 0;
        return Sample(now =>
        {
            // A node that falls on a sample up to rounding counts as passed.
            while (k + 1 < t.Length && t[k + 1] <= now + (1e-6 * Interval))
            {
                k++;
            }

            return now <= t[0] || k + 1 == t.Length
                ? v[k]
                : v[k] + ((v[k + 1] - v[k]) * Math.Clamp((now - t[k]) / (t[k + 1] - t[k]), 0, 1));
        });
    }
}
