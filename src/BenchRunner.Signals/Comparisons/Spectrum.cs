using System.Numerics;
using BenchRunner.Signals.Traces;
using MathNet.Numerics.IntegralTransforms;

namespace BenchRunner.Signals.Comparisons;

/// <summary>The discrete spectrum of a stretch of samples, of any length.</summary>
public static class Spectrum
{
    /// <summary>The spectrum of real samples.</summary>
    /// <param name="samples">The samples; finite.</param>
    /// <returns>X[k] = Σ x[n] e^(−2πi k n/N), not scaled, as many bins as samples.</returns>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    public static Complex[] Of(ReadOnlySpan<double> samples)
    {
        Finite.Require(samples, nameof(samples));
        Complex[] spectrum = new Complex[samples.Length];
        for (int i = 0; i < spectrum.Length; i++)
        {
            spectrum[i] = samples[i];
        }

        Fourier.Forward(spectrum, FourierOptions.Matlab);
        return spectrum;
    }

    /// <summary>The real samples of a spectrum; undoes <see cref="Of"/>.</summary>
    /// <param name="spectrum">The spectrum of real samples; used as working space.</param>
    public static double[] Back(Complex[] spectrum)
    {
        ArgumentNullException.ThrowIfNull(spectrum);
        Fourier.Inverse(spectrum, FourierOptions.Matlab);
        double[] samples = new double[spectrum.Length];
        for (int i = 0; i < samples.Length; i++)
        {
            samples[i] = spectrum[i].Real;
        }

        return samples;
    }
}
