namespace BenchRunner.Signals.Corrections;

/// <summary>Undoes the inductance of a current shunt: i + τ di/dt was recorded, τ = L/R; i is sought.</summary>
/// <remarks>
/// i is the record behind a first-order low-pass of τ. Between samples the record is taken as straight; for that the
/// recursion is exact: i₁ = r₁ − τ m + (i₀ − r₀ + τ m) e^(−dt/τ), m = (r₁ − r₀)/dt. It starts from rest, i₀ = r₀: on a
/// record that begins within a ramp the first few τ are high by τ times the slope, dying as e^(−t/τ).
/// </remarks>
internal static class ShuntCorrection
{
    /// <summary>Replaces what was recorded by the current.</summary>
    /// <param name="samples">The record, A; receives the current, A.</param>
    /// <param name="dt">Sample interval, s.</param>
    /// <param name="tau">L/R, s; above 0.</param>
    public static void Apply(Span<double> samples, double dt, double tau)
    {
        if (samples.IsEmpty)
        {
            return;
        }

        double keep = Math.Exp(-dt / tau), slope = tau / dt * (1 - keep);
        double fromBefore = slope - keep, fromNow = 1 - slope;
        double before = samples[0], current = before;
        for (int i = 1; i < samples.Length; i++)
        {
            double now = samples[i];
            double next = (keep * current) + ((fromBefore * before) + (fromNow * now));
            // Behind a clipped sample nothing is known of the past: start anew from rest.
            current = double.IsFinite(next) ? next : now;
            samples[i] = current;
            before = now;
        }
    }
}
