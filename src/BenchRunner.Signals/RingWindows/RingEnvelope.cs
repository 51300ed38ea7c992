using BenchRunner.Signals.LoadCurrent;
using BenchRunner.Signals.Ringing;

namespace BenchRunner.Signals.RingWindows;

/// <summary>A single damped cosine laid through the first periods of a ring, to say where its window begins and ends.
/// </summary>
/// <param name="Frequency">Damped frequency, Hz.</param>
/// <param name="Decay">Decay rate σ, 1/s; above 0.</param>
/// <param name="Amplitude">Amplitude at the first sample, in the signal's unit.</param>
/// <remarks>Not a result: nobody asks whether it is significant or explains the samples well, as of a
/// <see cref="RingMode"/>. The first periods hold the recovery's tail and a frequency that still moves.</remarks>
internal readonly record struct RingEnvelope(double Frequency, double Decay, double Amplitude)
{
    private const int FewestSamples = 24;
    private const double TypicalDamping = 0.05;

    /// <summary>Lays the cosine through samples; null where least squares find none that decays.</summary>
    /// <param name="samples">The first periods, uniform, finite.</param>
    /// <param name="dt">Sample interval, s.</param>
    /// <param name="period">About how long a period is, in samples.</param>
    public static RingEnvelope? Fit(ReadOnlySpan<double> samples, double dt, double period)
    {
        if (samples.Length < FewestSamples || Line.Fit(samples, 0, samples.Length - 1) is not { } trend)
        {
            return null;
        }

        double[] y = new double[samples.Length];
        double scale = 0;
        for (int i = 0; i < y.Length; i++)
        {
            y[i] = samples[i] - trend.At(i);
            scale = Math.Max(scale, Math.Abs(y[i]));
        }

        if (!(scale > 0) || !double.IsFinite(scale))
        {
            return null;
        }

        for (int i = 0; i < y.Length; i++)
        {
            y[i] /= scale;
        }

        RingFitSolver solver = new(y, 1);
        if (!Solve(solver, y, period))
        {
            return null;
        }

        double window = y.Length * dt;
        (double p, double q) = (solver.Linear[2], solver.Linear[3]);
        double amplitude = scale * Math.Sqrt((p * p) + (q * q));
        return new RingEnvelope(solver.Shape[1] / (2 * Math.PI * window), solver.Shape[0] / window, amplitude);
    }

    /// <summary>From the distance of the first maxima; where that leads nowhere, from the dominant subspace.</summary>
    /// <remarks>Where the model is rough the search creeps at its end; the envelope needs no twelve digits, so it is
    /// taken as it stands when it explains the better part of the samples.</remarks>
    private static bool Solve(RingFitSolver solver, ReadOnlySpan<double> y, double period)
    {
        Span<double> turn = [2 * Math.PI / period];
        Span<double> decay = [TypicalDamping * turn[0]];
        solver.Fit(decay, turn, double.PositiveInfinity);
        if (Rings(solver, y))
        {
            return true;
        }

        Span<double> scratch = stackalloc double[RingFitStart.ScratchLength];
        RingFitStart start = new(y, scratch);
        if (!start.Modes(1, decay, turn))
        {
            return false;
        }

        solver.Fit(decay, turn, double.PositiveInfinity);
        return Rings(solver, y);
    }

    private static bool Rings(RingFitSolver solver, ReadOnlySpan<double> y)
    {
        double squares = 0;
        foreach (double value in y)
        {
            squares += value * value;
        }

        return solver.Shape[0] > 0 && solver.Shape[0] < solver.Shape[1] && solver.Squares < squares / 2;
    }
}
