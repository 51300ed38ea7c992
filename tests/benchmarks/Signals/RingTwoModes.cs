using System.Globalization;
using BenchRunner.Signals.Ringing;

namespace BenchRunner.Benchmarks;

/// <summary>How often two modes of equal amplitude, 15 % apart, are told apart.</summary>
/// <remarks>Damping 0.03, noise 1 % of an amplitude, exactly ten periods of the slower mode; phases drawn. Told apart:
/// two modes, each frequency within 2 % of its truth.</remarks>
internal static class RingTwoModes
{
    private const int Trials = 500;
    private const int SamplesAPeriod = 20;
    private const double Apart = 1.15;
    private const double Near = 0.02;

    /// <summary>The share of trials.</summary>
    /// <param name="seed">Seed of the draws.</param>
    public static Outcome Measure(int seed)
    {
        Normal normal = new(seed);
        int right = 0;
        for (int trial = 0; trial < Trials; trial++)
        {
            NoisyRing low = new(50e6, 0.03, normal.Phase(), 0.01, 10 * SamplesAPeriod, 1 / (50e6 * SamplesAPeriod));
            NoisyRing high = low with { Frequency = Apart * low.Frequency, Phase = normal.Phase(), Noise = 0 };
            double[] first = low.Samples(normal);
            double[] second = high.Samples(normal);
            RingFitResult found = RingFit.Fit(
                [.. first.Select((y, n) => y + second[n])], low.Interval, RingFit.MostModes);
            double[] frequencies = [.. found.Modes.Select(mode => mode.Frequency).Order()];
            right += frequencies.Length == 2
                && Math.Abs((frequencies[0] / low.Frequency) - 1) <= Near
                && Math.Abs((frequencies[1] / high.Frequency) - 1) <= Near ? 1 : 0;
        }

        return new Outcome("1", new Figure((double)right / Trials, 0), Note: string.Create(
            CultureInfo.InvariantCulture, $"{right} of {Trials} trials, {10 * SamplesAPeriod} samples"));
    }
}
