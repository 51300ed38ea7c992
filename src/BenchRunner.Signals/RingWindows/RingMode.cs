namespace BenchRunner.Signals.RingWindows;

/// <summary>A decaying oscillation at the start of its window: A e^(−σ t) cos(ω t + φ).</summary>
/// <param name="Frequency">Damped frequency ω/2π, Hz.</param>
/// <param name="Damping">Damping ratio ζ = σ/√(σ² + ω²), 1.</param>
/// <param name="Amplitude">Amplitude A at the first sample of the window, in the signal's unit.</param>
public readonly record struct RingMode(double Frequency, double Damping, double Amplitude)
{
    /// <summary>Decay rate σ, 1/s.</summary>
    public double Decay => 2 * Math.PI * Frequency * Damping / Math.Sqrt(1 - (Damping * Damping));

    /// <summary>Quality, 1: 1/(2 ζ).</summary>
    public double Quality => 1 / (2 * Damping);
}
