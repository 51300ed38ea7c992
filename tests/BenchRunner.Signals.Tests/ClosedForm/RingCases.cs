using System.Text.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Ringing;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.ClosedForm;

/// <summary>Damped cosines with and without noise; the shunt's inductance.</summary>
internal static class RingCases
{
    public static Dictionary<string, double?> Ring(JsonElement waveform)
    {
        RingFitResult fit = RingFit.Fit(Samples(waveform), waveform.GetProperty("dt").GetDouble(), RingFit.MostModes);
        Assert.Null(fit.Reason);
        RingMode strongest = fit.Strongest!.Value;
        Dictionary<string, double?> got = new()
        {
            ["ring_frequency|ring/fit"] = strongest.Frequency,
            ["ring_damping|ring/fit"] = strongest.Damping,
            ["ring_amplitude|ring/fit"] = strongest.Amplitude,
            ["ring_q|ring/fit"] = strongest.Quality,
        };
        int number = 1;
        foreach (JsonElement given in waveform.GetProperty("modes").EnumerateArray())
        {
            double f = given.GetProperty("f").GetDouble();
            RingMode mode = fit.Modes.MinBy(m => Math.Abs(m.Frequency - f));
            got[$"mode {number}|f"] = mode.Frequency;
            got[$"mode {number}|damping"] = mode.Damping;
            got[$"mode {number}|sigma"] = mode.Decay;
            got[$"mode {number}|amplitude"] = mode.Amplitude;
            got[$"mode {number}|q"] = mode.Quality;
            got[$"mode {number}|decrement"] = mode.Decay / mode.Frequency;
            number++;
        }

        Assert.Equal(number - 1, fit.Order);
        return got;
    }

    /// <summary>What a noisy record may be off: four standard deviations at the Cramér-Rao bound, which the file gives
    /// for frequency and damping. What follows from those two takes theirs; of the amplitude, which has no bound in the
    /// file, the relative one at high signal to noise is near the damping's (both are the envelope's, by two thirds
    /// correlated).
    /// </summary>
    public static double Noise(JsonElement of, string key, double wanted)
    {
        JsonElement bounds = of.GetProperty("relative_standard_deviation_bound");
        string mode = key.StartsWith("mode 2", StringComparison.Ordinal) ? "mode 2" : "mode 1";
        string bound = key.EndsWith("|f", StringComparison.Ordinal)
            || key.StartsWith("ring_frequency", StringComparison.Ordinal)
            ? "f"
            : "damping";
        return 4 * bounds.GetProperty($"{mode}|{bound}").GetDouble() * Math.Abs(wanted);
    }

    public static Dictionary<string, double?> ShuntRamp(double resistance, double inductance, double slope)
    {
        Grid grid = new(0, 100e-9, 0.1e-9);
        double early = inductance / resistance * slope;
        Waveform recorded = new(0, grid.Interval, new Dictionary<Channel, double[]>
        {
            [Channel.IdLow] = grid.Sample(t => (slope * t) + early),
        });
        AnalysisSettings settings = new() { Shunt = new Shunt(resistance, inductance) };
        ReadOnlySpan<double> corrected = Correction.Correct(recorded, settings)[Channel.IdLow];
        double settled = grid.Time(grid.Count - 1);
        return new()
        {
            ["error|current at any time on the ramp"] = recorded[Channel.IdLow][^1] - (slope * settled),
            ["corrected|current error after the low-pass has settled"] = corrected[^1] - (slope * settled),
        };
    }

    private static double[] Samples(JsonElement waveform)
    {
        double dt = waveform.GetProperty("dt").GetDouble();
        double[] samples = new double[waveform.GetProperty("samples").GetInt32()];
        double sigma = waveform.GetProperty("noise_sigma").GetDouble();
        JsonElement seed = waveform.GetProperty("noise_seed");
        ulong state = seed.ValueKind == JsonValueKind.Number ? seed.GetUInt64() : 0;
        for (int i = 0; i < samples.Length; i++)
        {
            double t = i * dt;
            samples[i] = waveform.GetProperty("c").GetDouble() + (waveform.GetProperty("d").GetDouble() * t);
            foreach (JsonElement mode in waveform.GetProperty("modes").EnumerateArray())
            {
                double omega = 2 * Math.PI * mode.GetProperty("f").GetDouble();
                double damping = mode.GetProperty("damping").GetDouble();
                double decay = damping * omega / Math.Sqrt(1 - (damping * damping));
                samples[i] += mode.GetProperty("amplitude").GetDouble()
                    * Math.Exp(-decay * t) * Math.Cos((omega * t) + mode.GetProperty("phase").GetDouble());
            }

            samples[i] += sigma > 0 ? sigma * Normal(ref state) : 0;
        }

        return samples;
    }

    /// <summary>The file's noise: Box-Muller from splitmix64, one value a pair.</summary>
    private static double Normal(ref ulong state)
    {
        double first = Uniform(ref state);
        double second = Uniform(ref state);
        return Math.Sqrt(-2 * Math.Log(first)) * Math.Cos(2 * Math.PI * second);
    }

    private static double Uniform(ref ulong state)
    {
        ulong z = state += 0x9E3779B97F4A7C15;
        z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9;
        z = (z ^ (z >> 27)) * 0x94D049BB133111EB;
        z ^= z >> 31;
        return ((z >> 11) + 0.5) / (1UL << 53);
    }
}
