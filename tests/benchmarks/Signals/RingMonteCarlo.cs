using System.Globalization;
using BenchRunner.Signals.Ringing;

namespace BenchRunner.Benchmarks;

/// <summary>Scatter and bias of the ring fit over many draws of the noise, beside the Cramér-Rao bound.</summary>
/// <remarks>
/// The phase is drawn with the noise, and each error is taken in units of the bound at its phase. Of 4,000 draws the
/// spread is known to 1/√(2 · 4,000) = 1.1 %, the bias to 1/√4,000 = 1.6 % of the spread. The fit is free to choose one
/// to three modes, as in an analysis.
/// </remarks>
/// <param name="seed">Seed of the draws.</param>
internal sealed class RingMonteCarlo(int seed)
{
    private const int Draws = 4000;
    private static readonly double[] _noises = [0.003, 0.01, 0.02, 0.05];

    private readonly Lazy<Level[]> _levels = new(() => [.. _noises.Select((noise, i) => Draw(noise, (4 * seed) + i))]);

    /// <summary>Spread of the frequency over its bound, at the worst noise.</summary>
    public Outcome FrequencySpread() => Spread("Hz", level => level.Frequency, level => level.FrequencyBound);

    /// <summary>Spread of the damping ratio over its bound, at the worst noise.</summary>
    public Outcome DampingSpread() => Spread("1", level => level.Damping, level => level.DampingBound);

    /// <summary>Bias over spread, worst of frequency and damping at every noise.</summary>
    public Outcome Bias()
    {
        double worst = _levels.Value.Max(level => Math.Max(level.Frequency.Bias, level.Damping.Bias));
        return new Outcome("1", new Figure(worst, 0), Missing: Lost(), Note: string.Join(", ", _levels.Value.Select(
            level => string.Create(
                CultureInfo.InvariantCulture,
                $"{level.Noise:0.0 %}: f {level.Frequency.Bias:0.000}, damping {level.Damping.Bias:0.000}"))));
    }

    private static Level Draw(double noise, int seed)
    {
        Normal normal = new(seed);
        List<double> frequencies = [];
        List<double> dampings = [];
        for (int draw = 0; draw < Draws; draw++)
        {
            NoisyRing ring = NoisyRing.Usual with { Noise = noise, Phase = normal.Phase() };
            if (RingFit.Fit(ring.Samples(normal), ring.Interval, RingFit.MostModes).Strongest is { } mode)
            {
                (double frequency, double damping) = RingBound.Of(ring);
                frequencies.Add((mode.Frequency - ring.Frequency) / frequency);
                dampings.Add((mode.Damping - ring.Damping) / damping);
            }
        }

        (double frequencyBound, double dampingBound) = RingBound.Of(NoisyRing.Usual with { Noise = noise });
        return new Level(
            noise, Scatter.Of(frequencies), Scatter.Of(dampings), frequencyBound, dampingBound,
            Draws - frequencies.Count);
    }

    private Outcome Spread(string unit, Func<Level, Scatter> scatter, Func<Level, double> bound)
    {
        Level worst = _levels.Value.MaxBy(level => scatter(level).Spread)!;
        double uncertainty = 1 / Math.Sqrt(2 * Draws);
        return new Outcome(
            unit,
            new Figure(scatter(worst).Spread * bound(worst), uncertainty),
            Floor: new Figure(bound(worst), 0),
            Missing: Lost(),
            Note: string.Join(", ", _levels.Value.Select(level => string.Create(
                CultureInfo.InvariantCulture, $"{level.Noise:0.0 %}: {scatter(level).Spread:0.000}"))));
    }

    private string? Lost() => _levels.Value.Sum(level => level.Lost) is > 0 and var lost
        ? $"{lost} of {Draws * _noises.Length} draws gave no ring"
        : null;

    private sealed record Level(
        double Noise, Scatter Frequency, Scatter Damping, double FrequencyBound, double DampingBound, int Lost);
}
