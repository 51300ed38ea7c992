namespace BenchRunner.Benchmarks;

/// <summary>A damped cosine on a straight line in white noise; its truth is known.</summary>
/// <param name="Frequency">Damped frequency, Hz.</param>
/// <param name="Damping">Damping ratio, 1.</param>
/// <param name="Phase">Phase at the first sample, rad.</param>
/// <param name="Noise">Standard deviation of the noise over the amplitude, 1.</param>
/// <param name="Count">Samples.</param>
/// <param name="Interval">Sample interval, s.</param>
internal sealed record NoisyRing(
    double Frequency, double Damping, double Phase, double Noise, int Count, double Interval)
{
    private const double Offset = 400;
    private const double Slope = 2e6;

    /// <summary>Amplitude at the first sample, V.</summary>
    public const double Amplitude = 100;

    /// <summary>500 samples of 1 ns, 35 MHz, damping 0.04.</summary>
    public static NoisyRing Usual { get; } = new(35e6, 0.04, 0.3, 0, 500, 1e-9);

    /// <summary>Decay rate, 1/s.</summary>
    public double Decay => Turn * Damping / Math.Sqrt(1 - (Damping * Damping));

    /// <summary>Angular frequency, rad/s.</summary>
    public double Turn => 2 * Math.PI * Frequency;

    /// <summary>Draws a record, V.</summary>
    /// <param name="normal">Where the noise comes from.</param>
    public double[] Samples(Normal normal)
    {
        double[] samples = new double[Count];
        for (int n = 0; n < Count; n++)
        {
            double t = n * Interval;
            samples[n] = Offset + (Slope * t) + (Amplitude * Noise * normal.Next())
                + (Amplitude * Math.Exp(-Decay * t) * Math.Cos((Turn * t) + Phase));
        }

        return samples;
    }
}
