namespace BenchRunner.Signals.Ringing;

/// <summary>Turns a solved fit into modes with their standard uncertainties.</summary>
internal static class RingFitReport
{
    /// <summary>Decay over the window below which an oscillation is steady within rounding.</summary>
    private const double LeastDecay = 1e-9;

    /// <summary>Describes a fit.</summary>
    /// <param name="fit">The solved fit.</param>
    /// <param name="y">The samples fitted; not modified.</param>
    /// <param name="dt">Sample interval, s.</param>
    /// <returns>The modes, or the reason why the fit is none.</returns>
    public static RingFitResult Describe(RingFitSolver fit, ReadOnlySpan<double> y, double dt)
    {
        int modes = fit.Shape.Length / 2, size = RingFitColumns.Samples(modes);
        double[] padded = new double[y.Length + RingFitNoise.Longest];
        Span<double> residual = padded.AsSpan(0, y.Length);
        RingFitColumns.Combine(fit.Shape, fit.Linear, residual);
        double squares = 0;
        for (int n = 0; n < y.Length; n++)
        {
            residual[n] = y[n] - residual[n];
            squares += residual[n] * residual[n];
        }

        Span<double> inverse = stackalloc double[size * size];
        if (!fit.Covariance(inverse))
        {
            return RingFitResult.None("no ringing found");
        }

        RingFitSpread spread = new(fit, inverse, RingFitNoise.Of(padded), squares / (y.Length - size), residual);
        double window = y.Length * dt;
        var found = new List<RingMode>(modes);
        for (int k = 0; k < modes; k++)
        {
            if (fit.IsBareDecay(k))
            {
                continue;
            }

            if (!(fit.Shape[2 * k] > LeastDecay))
            {
                return RingFitResult.None("no ringing found: the oscillation does not decay");
            }

            found.Add(Mode(fit, k, spread, window));
        }

        if (found.Count == 0)
        {
            return RingFitResult.None("no ringing found: a bare decay");
        }

        found.Sort((a, b) => a.IsRinging == b.IsRinging ? b.Strength.CompareTo(a.Strength) : a.IsRinging ? -1 : 1);
        return found[0].IsRinging && found.TrueForAll(mode => double.IsFinite(mode.Frequency))
            ? new RingFitResult(found, fit.Linear[0], fit.Linear[1] / window, Math.Sqrt(squares / y.Length), null)
            : RingFitResult.None("no ringing found: what oscillates dies within a period");
    }

    private static RingMode Mode(RingFitSolver fit, int k, RingFitSpread spread, double window)
    {
        int cosine = 2 + (2 * k), shape = cosine + fit.Shape.Length;
        double p = fit.Linear[cosine], q = fit.Linear[cosine + 1];
        double s = fit.Shape[2 * k], w = fit.Shape[(2 * k) + 1];
        double amplitude = Math.Sqrt((p * p) + (q * q));
        double natural = Math.Sqrt((s * s) + (w * w));
        double bySine = w * w / (natural * natural * natural), byTurn = -s * w / (natural * natural * natural);
        return new RingMode(
            Frequency: w / (2 * Math.PI * window),
            Damping: s / natural,
            Amplitude: amplitude,
            Phase: Math.Atan2(-q, p),
            FrequencyUncertainty: spread.Of(shape, 0, 1) / (2 * Math.PI * window),
            DampingUncertainty: spread.Of(shape, bySine, byTurn),
            AmplitudeUncertainty: spread.Of(cosine, p / amplitude, q / amplitude));
    }
}
