using System.Text.Json;

namespace BenchRunner.Signals.Tests.Ringing;

/// <summary>Records of damped cosines, as closed-form.json describes them, and its noise.</summary>
internal sealed record RingRecord(
    double C,
    double D,
    double Dt,
    int Count,
    (double F, double Damping, double Amplitude, double Phase)[] Modes,
    double Sigma,
    ulong Seed)
{
    public static RingRecord Of(JsonElement waveform)
    {
        double Number(string name) => waveform.GetProperty(name).GetDouble();
        double sigma = Number("noise_sigma");
        return new RingRecord(
            Number("c"),
            Number("d"),
            Number("dt"),
            waveform.GetProperty("samples").GetInt32(),
            [.. waveform.GetProperty("modes").EnumerateArray().Select(mode => (
                mode.GetProperty("f").GetDouble(),
                mode.GetProperty("damping").GetDouble(),
                mode.GetProperty("amplitude").GetDouble(),
                mode.GetProperty("phase").GetDouble()))],
            sigma,
            sigma > 0 ? waveform.GetProperty("noise_seed").GetUInt64() : 0);
    }

    public double[] Samples()
    {
        double[] noise = Noise(Seed, Count);
        double[] y = new double[Count];
        for (int n = 0; n < Count; n++)
        {
            double t = n * Dt;
            y[n] = C + (D * t) + (Sigma * noise[n]);
            foreach ((double f, double damping, double amplitude, double phase) in Modes)
            {
                double w = 2 * Math.PI * f;
                double s = damping * w / Math.Sqrt(1 - (damping * damping));
                y[n] += amplitude * Math.Exp(-s * t) * Math.Cos((w * t) + phase);
            }
        }

        return y;
    }

    /// <summary>Standard normal values by Box and Muller from splitmix64, one a pair of draws.</summary>
    public static double[] Noise(ulong seed, int count)
    {
        ulong state = seed;
        double[] values = new double[count];
        for (int i = 0; i < count; i++)
        {
            double u1 = Uniform(ref state), u2 = Uniform(ref state);
            values[i] = Math.Sqrt(-2 * Math.Log(u1)) * Math.Cos(2 * Math.PI * u2);
        }

        return values;
    }

    /// <summary>Standard normal values, each correlated with the one before it: r[n] = ρ r[n−1] + √(1 − ρ²) e[n].</summary>
    public static double[] Noise(ulong seed, int count, double correlation)
    {
        double[] values = Noise(seed, count);
        for (int n = 1; n < count; n++)
        {
            values[n] = (correlation * values[n - 1]) + (Math.Sqrt(1 - (correlation * correlation)) * values[n]);
        }

        return values;
    }

    private static double Uniform(ref ulong state)
    {
        state += 0x9E3779B97F4A7C15;
        ulong x = state;
        x = (x ^ (x >> 30)) * 0xBF58476D1CE4E5B9;
        x = (x ^ (x >> 27)) * 0x94D049BB133111EB;
        x ^= x >> 31;
        return ((x >> 11) + 0.5) / 9007199254740992.0;
    }
}
