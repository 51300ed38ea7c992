namespace BenchRunner.Signals.Ringing;

/// <summary>One damped oscillation of a ring: A e^(−σ t) cos(2π f t + φ), t from the window's start.</summary>
/// <param name="Frequency">Damped frequency f = ω/2π, Hz.</param>
/// <param name="Damping">Damping ratio ζ = σ/√(σ² + ω²), 1, in (0, 1).</param>
/// <param name="Amplitude">Amplitude A at the first sample of the window, in the samples' unit.</param>
/// <param name="Phase">Phase φ at the first sample, rad, in (−π, π].</param>
/// <param name="FrequencyUncertainty">Standard uncertainty of the frequency, Hz.</param>
/// <param name="DampingUncertainty">Standard uncertainty of the damping ratio, 1.</param>
/// <param name="AmplitudeUncertainty">Standard uncertainty of the amplitude, in the samples' unit.</param>
public readonly record struct RingMode(
    double Frequency,
    double Damping,
    double Amplitude,
    double Phase,
    double FrequencyUncertainty,
    double DampingUncertainty,
    double AmplitudeUncertainty)
{
    /// <summary>Damping ratio from which on an oscillation is no ringing: it dies within a period.</summary>
    public const double RingingBelow = 0.3;

    /// <summary>Decay rate σ = 2π f ζ/√(1 − ζ²), 1/s.</summary>
    public double Decay => 2 * Math.PI * Frequency * Damping / Math.Sqrt(1 - (Damping * Damping));

    /// <summary>Quality Q = 1/(2ζ), 1.</summary>
    public double Quality => 1 / (2 * Damping);

    /// <summary>Whether the oscillation is damped weakly enough to be called ringing.</summary>
    public bool IsRinging => Damping < RingingBelow;

    /// <summary>A²/σ, what the mode carries: the measure by which one mode is stronger than another.</summary>
    public double Strength => Amplitude * Amplitude / Decay;
}
