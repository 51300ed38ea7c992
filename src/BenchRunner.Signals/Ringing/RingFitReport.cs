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
        int modes = fit.Shape.Length / 2, size = 2 + (4 * modes);
        double[] residual = y.ToArray();
        RingFitColumns.Subtract(residual, fit.Shape, fit.Linear);
        double squares = 0;
        foreach (double value in residual)
        {
            squares += value * value;
        }

        Span<double> covariance = stackalloc double[size * size];
        if (!fit.Covariance(covariance))
        {
            return RingFitResult.None("no ringing found");
        }

        double variance = squares / (y.Length - size) * Correlation(residual, squares);
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

            found.Add(Mode(fit, k, covariance, variance, window));
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

    /// <summary>1 + 2 Σ ρ over the lags before the residuals' autocorrelation first is not positive.</summary>
    private static double Correlation(ReadOnlySpan<double> residual, double squares)
    {
        double factor = 1;
        for (int lag = 1; lag < residual.Length; lag++)
        {
            double sum = 0;
            for (int n = 0; n + lag < residual.Length; n++)
            {
                sum += residual[n] * residual[n + lag];
            }

            if (!(sum > 0))
            {
                break;
            }

            factor += 2 * sum / squares;
        }

        return factor;
    }

    private static RingMode Mode(
        RingFitSolver fit, int k, ReadOnlySpan<double> covariance, double variance, double window)
    {
        int modes = fit.Shape.Length / 2, size = 2 + (4 * modes);
        int cosine = 2 + (2 * k), shape = cosine + (2 * modes);
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
            FrequencyUncertainty: Spread(covariance, size, shape, 0, 1, variance) / (2 * Math.PI * window),
            DampingUncertainty: Spread(covariance, size, shape, bySine, byTurn, variance),
            AmplitudeUncertainty: Spread(covariance, size, cosine, p / amplitude, q / amplitude, variance));
    }

    /// <summary>Standard uncertainty of a combination of two neighbouring unknowns.</summary>
    private static double Spread(
        ReadOnlySpan<double> covariance, int size, int at, double first, double second, double variance)
    {
        double v = (first * first * covariance[(at * size) + at])
            + (2 * first * second * covariance[(at * size) + at + 1])
            + (second * second * covariance[((at + 1) * size) + at + 1]);
        return Math.Sqrt(Math.Max(0, v * variance));
    }
}
