using System.Buffers;
using System.Numerics;

namespace BenchRunner.Signals.Ringing;

/// <summary>The ring fit of a record that has far more samples than its ringing needs.</summary>
/// <remarks>
/// The mean of m samples in a row of a damped oscillation is the same oscillation, m samples apart: frequency and decay
/// are untouched, amplitude and phase change by the known factor (1 − z^m)/(m (1 − z)), z = e^((−σ + iω) dt), and white
/// noise falls by √m. With 32 means a period the information lost is sinc²(1/32), 0.3 %.
/// </remarks>
internal static class RingThinning
{
    /// <summary>Means a period that are kept at least.</summary>
    private const double MeansPerPeriod = 32;

    /// <summary>Fits the ring of a window, of means where a period has many samples.</summary>
    /// <param name="samples">The window, V or A, uniform; finite; not modified.</param>
    /// <param name="dt">Sample interval, s.</param>
    /// <param name="period">Period of the ringing that is expected, in samples.</param>
    /// <param name="maximumModes">The most modes to try.</param>
    /// <returns>What <see cref="RingFit.Fit"/> gives, of the samples themselves; the residual is that of the
    /// means.</returns>
    public static RingFitResult Fit(ReadOnlySpan<double> samples, double dt, double period, int maximumModes)
    {
        int part = (int)Math.Min(period / MeansPerPeriod, samples.Length);
        if (part < 2)
        {
            return RingFit.Fit(samples, dt, maximumModes);
        }

        int count = samples.Length / part;
        double[] means = ArrayPool<double>.Shared.Rent(count);
        for (int i = 0; i < count; i++)
        {
            double sum = 0;
            foreach (double sample in samples.Slice(i * part, part))
            {
                sum += sample;
            }

            means[i] = sum / part;
        }

        RingFitResult thinned = RingFit.Fit(means.AsSpan(0, count), part * dt, maximumModes);
        ArrayPool<double>.Shared.Return(means);
        return thinned with
        {
            Modes = [.. thinned.Modes.Select(mode => Restore(mode, dt, part))],
            Offset = thinned.Offset - (thinned.Slope * (part - 1) / 2 * dt),
        };
    }

    private static RingMode Restore(RingMode mode, double dt, int part)
    {
        Complex z = Complex.Exp(new Complex(-mode.Decay, 2 * Math.PI * mode.Frequency) * dt);
        Complex factor = (1 - Complex.Pow(z, part)) / (part * (1 - z));
        double size = factor.Magnitude;
        return mode with
        {
            Amplitude = mode.Amplitude / size,
            AmplitudeUncertainty = mode.AmplitudeUncertainty / size,
            Phase = Math.IEEERemainder(mode.Phase - factor.Phase, 2 * Math.PI),
        };
    }
}
