using BenchRunner.Signals.Ringing;

namespace BenchRunner.Signals.Tests.Ringing;

/// <summary>What many fits of drawn records made of the frequencies and dampings that went in.</summary>
internal sealed class RingTrials
{
    private readonly List<(double InBounds, double InOwn)> _frequency = [];
    private readonly List<(double InBounds, double InOwn)> _damping = [];

    /// <summary>Fits without a result, or with another number of modes than went in.</summary>
    public int Wrong { get; private set; }

    public Summary Frequency => new(_frequency);

    public Summary Damping => new(_damping);

    /// <summary>Fits records of one kind.</summary>
    /// <param name="record">The record; its seed starts the draws.</param>
    /// <param name="draws">How many.</param>
    /// <param name="correlation">Correlation of the noise from sample to sample.</param>
    public RingTrials Draw(RingRecord record, int draws, double correlation = 0)
    {
        double[] clean = (record with { Sigma = 0 }).Samples();
        (double F, double Damping)[] bounds = RingBound.Of(record);
        for (int draw = 0; draw < draws; draw++)
        {
            double[] noise = RingRecord.Noise(record.Seed + (7919 * (ulong)draw), record.Count, correlation);
            double[] samples = [.. clean.Select((value, n) => value + (record.Sigma * noise[n]))];
            RingFitResult ring = RingFit.Fit(samples, record.Dt, RingFit.MostModes);
            if (ring.Order != record.Modes.Length)
            {
                Wrong++;
                continue;
            }

            for (int k = 0; k < bounds.Length; k++)
            {
                (double f, double damping, _, _) = record.Modes[k];
                RingMode mode = ring.Modes.MinBy(mode => Math.Abs(mode.Frequency - f));
                double error = mode.Frequency - f;
                _frequency.Add((error / (f * bounds[k].F), error / mode.FrequencyUncertainty));
                error = mode.Damping - damping;
                _damping.Add((error / (damping * bounds[k].Damping), error / mode.DampingUncertainty));
            }
        }

        return this;
    }

    /// <summary>Errors of one number over all trials.</summary>
    /// <param name="Spread">Standard deviation over the Cramér-Rao bound.</param>
    /// <param name="Bias">Mean over the standard deviation.</param>
    /// <param name="Own">Root mean square in units of the fit's own standard uncertainty.</param>
    internal readonly record struct Summary(double Spread, double Bias, double Own)
    {
        public Summary(IReadOnlyList<(double InBounds, double InOwn)> errors)
            : this(0, 0, Math.Sqrt(errors.Average(error => error.InOwn * error.InOwn)))
        {
            double mean = errors.Average(error => error.InBounds);
            Spread = Math.Sqrt(errors.Average(error => (error.InBounds - mean) * (error.InBounds - mean)));
            Bias = mean / Spread;
        }
    }
}
