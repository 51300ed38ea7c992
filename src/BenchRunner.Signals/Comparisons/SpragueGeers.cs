using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>How far a measured waveform is from a reference, split into size and timing, after Sprague and
/// Geers.</summary>
/// <param name="Magnitude">Magnitude error M, 1: 0.1 where the measured one is 10 % larger.</param>
/// <param name="Phase">Phase error P, 1, from 0 (in phase) to 1 (inverted).</param>
public readonly record struct SpragueGeers(double Magnitude, double Phase)
{
    /// <summary>Both together, √(M² + P²), 1.</summary>
    public double Combined => Math.Sqrt((Magnitude * Magnitude) + (Phase * Phase));

    /// <summary>Compares two aligned waveforms.</summary>
    /// <param name="measured">Measured samples; finite.</param>
    /// <param name="reference">Reference samples on the same grid; finite, not all zero.</param>
    /// <returns>The errors; null where one of the two is zero throughout.</returns>
    /// <exception cref="ArgumentException">The spans differ in length, or a sample is NaN or infinite.</exception>
    /// <remarks>M = √(Σm²/Σc²) − 1, P = acos(Σmc/√(Σm² Σc²))/π (Sprague and Geers 2004, from memory). The angle is
    /// taken by its half, 2 atan2(|û − v̂|, |û + v̂|), since acos loses half the digits near equality.</remarks>
    /// <example>Whole periods of a sine, late by 0.5 rad: M = 0, P = 0.5/π.</example>
    public static SpragueGeers? Form(ReadOnlySpan<double> measured, ReadOnlySpan<double> reference)
    {
        if (measured.Length != reference.Length)
        {
            throw new ArgumentException("Compared waveforms have one length.", nameof(reference));
        }

        Finite.Require(measured, nameof(measured));
        Finite.Require(reference, nameof(reference));
        double m = Math.Sqrt(Squares(measured));
        double c = Math.Sqrt(Squares(reference));
        if (!(m > 0) || !(c > 0))
        {
            return null;
        }

        double apart = 0;
        double together = 0;
        for (int i = 0; i < measured.Length; i++)
        {
            double u = measured[i] / m;
            double v = reference[i] / c;
            apart += (u - v) * (u - v);
            together += (u + v) * (u + v);
        }

        return new SpragueGeers((m / c) - 1, 2 * Math.Atan2(Math.Sqrt(apart), Math.Sqrt(together)) / Math.PI);
    }

    private static double Squares(ReadOnlySpan<double> samples)
    {
        double sum = 0;
        foreach (double x in samples)
        {
            sum += x * x;
        }

        return sum;
    }
}
