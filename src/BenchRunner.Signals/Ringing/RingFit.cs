using System.Buffers;

namespace BenchRunner.Signals.Ringing;

/// <summary>Damped oscillations fitted to the ringing after an edge, <c>ring/fit</c>.</summary>
/// <remarks>
/// <para>y(t) = c + d t + Σ A e^(−σ t) cos(2π f t + φ), one to three modes, t from the first sample. The order is that
/// of the shortest description, N ln(rms) + (2 + 4 modes)/2 · ln N (minimum description length, Rissanen 1978, from
/// memory). A mode closer to a stronger one than 1/T (T the window), not decaying, or within what chance makes of noise
/// is not believed: the order is lowered by one. Chance: the strongest mode must be six times its own standard
/// uncertainty, any other √(3 ln N) times and at least three.</para>
/// <para>Standard uncertainties come from the covariance of the least squares in noise of the residuals' variance and
/// colour (<see cref="RingFitSpread"/>). They hold in white noise and behind a probe's pole alike; they know nothing of
/// a frequency that moves within the window.</para>
/// <para>What can go wrong: a window that still holds the recovery's tail or the bend of a capacitance gives dampings
/// that are too high; two or three slow waves of noise that is strongly correlated from sample to sample may pass for
/// a ring (1 record in 100 at 100 samples and a correlation of 0.9).</para>
/// </remarks>
public static class RingFit
{
    /// <summary>The most modes a fit distinguishes.</summary>
    public const int MostModes = 3;

    private const int SamplesPerParameter = 4;
    private const double FewestPeriods = 2;
    private const double SignificantAt = 3;

    /// <summary>How many times its own standard uncertainty the strongest mode must be: what is sought over all
    /// frequencies and decays is found at four in noise alone.</summary>
    private const double BeyondChanceAt = 6;

    /// <summary>A residual below this part of the record's own rms is none: no recorder resolves it.</summary>
    private const double Floor = 1e-7;

    /// <summary>Samples that differ by less than this part of their size are constant within rounding.</summary>
    private const double Rounding = 1e-13;

    /// <summary>Tolerance while the order is sought: a rough fit tells orders apart as well.</summary>
    private const double RoughTolerance = 1e-5;

    /// <summary>A reduction of the sum of squares by this many of its mean terms tells no orders apart.</summary>
    private const double RoughSquares = 0.01;

    private const string NoRinging = "no ringing found";

    /// <summary>Fits the ring of a window.</summary>
    /// <param name="samples">The window, V or A, uniform; finite; not modified.</param>
    /// <param name="dt">Sample interval, s; finite, above 0.</param>
    /// <param name="maximumModes">The most modes to try, 1 to 3.</param>
    /// <returns>The modes, the strongest ringing one (damping below 0.3) first; or a reason: fewer than 4 samples a
    /// parameter (24 samples for one mode), fewer than 2 periods, no ringing found. Never a zero in place of a value.
    /// </returns>
    /// <exception cref="ArgumentOutOfRangeException"><paramref name="dt"/> is not finite and positive, or
    /// <paramref name="maximumModes"/> is not 1 to 3.</exception>
    /// <exception cref="ArgumentException">A sample is NaN or infinite: a clipped ring cannot be fitted.</exception>
    /// <example>700 samples at 0.4 ns of 20 V + 15 V e^(−σ t) cos(2π 87 MHz t + 0.3) with a damping ratio of 0.026 give
    /// 87 MHz, 0.026 and 15 V.</example>
    public static RingFitResult Fit(ReadOnlySpan<double> samples, double dt, int maximumModes)
    {
        if (!double.IsFinite(dt) || dt <= 0)
        {
            throw new ArgumentOutOfRangeException(nameof(dt), dt, "must be finite and above 0 s");
        }

        ArgumentOutOfRangeException.ThrowIfLessThan(maximumModes, 1);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(maximumModes, MostModes);
        double scale = 0;
        foreach (double sample in samples)
        {
            if (!double.IsFinite(sample))
            {
                throw new ArgumentException("A sample is not finite.", nameof(samples));
            }

            scale = Math.Max(scale, Math.Abs(sample));
        }

        int most = Math.Min(maximumModes, ((samples.Length / SamplesPerParameter) - 2) / 4);
        if (most < 1)
        {
            return RingFitResult.None("fewer than 4 samples a parameter");
        }

        double[] rented = ArrayPool<double>.Shared.Rent(samples.Length);
        try
        {
            Memory<double> scaled = rented.AsMemory(0, samples.Length);
            Span<double> y = scaled.Span;
            for (int n = 0; n < y.Length; n++)
            {
                y[n] = scale > 0 ? samples[n] / scale : 0;
            }

            (double offset, double slope) = RemoveLine(y);
            return FitScaled(scaled, dt, most) switch
            {
                { Reason: null } ring => Restore(ring, scale, offset, slope / dt),
                var none => none,
            };
        }
        finally
        {
            ArrayPool<double>.Shared.Return(rented);
        }
    }

    private static RingFitResult FitScaled(ReadOnlyMemory<double> samples, double dt, int most)
    {
        ReadOnlySpan<double> y = samples.Span;
        double squares = 0;
        foreach (double value in y)
        {
            squares += value * value;
        }

        double rms = Math.Sqrt(squares / y.Length);
        if (rms < Rounding)
        {
            return RingFitResult.None(NoRinging);
        }

        RingFitSolver?[] fits = new RingFitSolver?[most + 1];
        int order = ChooseOrder(samples, rms, fits);
        RingFitResult none = RingFitResult.None(NoRinging);
        for (; order > 0; order--)
        {
            if (fits[order] is not { } fit)
            {
                continue;
            }

            // More than one mode is mostly judged by the rough fit: what is not there takes the search long to pin down.
            RingFitResult result = none;
            bool believed = (order == 1 || Judge(fit, y, dt, out result)) && fit.Refine() && Judge(fit, y, dt, out result);
            if (believed)
            {
                return result.Modes[0].Frequency * y.Length * dt < FewestPeriods
                    ? RingFitResult.None("fewer than 2 periods")
                    : result;
            }

            none = result.Reason is null ? none : result;
        }

        return none;
    }

    private static bool Judge(RingFitSolver fit, ReadOnlySpan<double> y, double dt, out RingFitResult result)
    {
        result = RingFitReport.Describe(fit, y, dt);
        return result.Reason is null && IsBelievable(result.Modes, y.Length, y.Length * dt);
    }

    /// <summary>Fits one mode after the other until the description no longer gets shorter.</summary>
    private static int ChooseOrder(ReadOnlyMemory<double> samples, double rms, RingFitSolver?[] fits)
    {
        ReadOnlySpan<double> y = samples.Span;
        Span<double> scratch = stackalloc double[RingFitStart.ScratchLength];
        var start = new RingFitStart(y, scratch);
        Span<double> decay = stackalloc double[MostModes];
        Span<double> turn = stackalloc double[MostModes];
        double shortest = Description(y.Length, rms, rms, 0);
        int best = 0;
        for (int modes = 1; modes < fits.Length; modes++)
        {
            double target = y.Length * Square(Math.Exp((shortest - Price(y.Length, modes)) / y.Length));
            if (target <= y.Length * Square(Floor * rms))
            {
                break;
            }

            if (!start.Modes(modes, decay, turn))
            {
                continue;
            }

            var fit = new RingFitSolver(samples, modes);
            if (fit.Fit(decay, turn, target, RoughTolerance, RoughSquares / y.Length))
            {
                (fits[modes], best) = (fit, modes);
                shortest = Description(y.Length, Math.Sqrt(fit.Squares / y.Length), rms, modes);
            }
            else if (best > 0)
            {
                break;
            }
        }

        return best;
    }

    private static double Description(int samples, double rms, double whole, int modes) =>
        (samples * Math.Log(Math.Max(rms, Floor * whole))) + Price(samples, modes);

    /// <summary>What the parameters add to the length of a description.</summary>
    private static double Price(int samples, int modes) => (2 + (4 * modes)) / 2.0 * Math.Log(samples);

    private static double Square(double x) => x * x;

    private static bool IsBelievable(IReadOnlyList<RingMode> modes, int samples, double window)
    {
        double least = BeyondChanceAt;
        for (int i = 0; i < modes.Count; i++)
        {
            if (!(modes[i].Amplitude >= least * modes[i].AmplitudeUncertainty))
            {
                return false;
            }

            for (int j = 0; j < i; j++)
            {
                if (Math.Abs(modes[i].Frequency - modes[j].Frequency) < 1 / window)
                {
                    return false;
                }
            }

            // With the samples grows the number of patterns among which chance finds one.
            least = Math.Max(SignificantAt, Math.Sqrt(3 * Math.Log(samples)));
        }

        return true;
    }

    /// <summary>Takes the line of least squares out; returns its value at sample 0 and its slope.</summary>
    private static (double Offset, double Slope) RemoveLine(Span<double> y)
    {
        double centre = (y.Length - 1) / 2.0, mean = 0, moment = 0;
        for (int n = 0; n < y.Length; n++)
        {
            mean += y[n];
            moment += (n - centre) * y[n];
        }

        mean /= y.Length;
        double slope = moment / (y.Length * (((double)y.Length * y.Length) - 1) / 12);
        for (int n = 0; n < y.Length; n++)
        {
            y[n] -= mean + ((n - centre) * slope);
        }

        return (mean - (centre * slope), slope);
    }

    private static RingFitResult Restore(RingFitResult ring, double scale, double offset, double slope)
    {
        return ring with
        {
            Modes = [.. ring.Modes.Select(mode => mode with
            {
                Amplitude = mode.Amplitude * scale,
                AmplitudeUncertainty = mode.AmplitudeUncertainty * scale,
            })],
            Offset = (ring.Offset + offset) * scale,
            Slope = (ring.Slope + slope) * scale,
            ResidualRms = ring.ResidualRms * scale,
        };
    }
}
