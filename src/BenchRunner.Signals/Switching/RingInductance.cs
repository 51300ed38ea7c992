namespace BenchRunner.Signals.Switching;

/// <summary>The inductance that rings with a known capacitance.</summary>
public static class RingInductance
{
    /// <summary>Inductance of a series resonance by its damped frequency.</summary>
    /// <param name="frequency">Damped frequency f, Hz; above 0.</param>
    /// <param name="damping">Damping ratio ζ, 1, in [0, 1).</param>
    /// <param name="capacitance">Capacitance C, F; above 0.</param>
    /// <returns>Inductance, H.</returns>
    /// <remarks>ω0² = ω²/(1 − ζ²), so L = (1 − ζ²)/((2πf)² C). A capacitance that depends on the voltage makes it an
    /// effective value at the ring's own swing.</remarks>
    /// <example>87 MHz, 0.026 and 780 pF: 4.2876 nH.</example>
    public static double Form(double frequency, double damping, double capacitance)
    {
        double omega = 2 * Math.PI * frequency;
        return (1 - (damping * damping)) / (omega * omega * capacitance);
    }
}
