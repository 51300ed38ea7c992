using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Ringing;

namespace BenchRunner.Signals.RingWindows;

/// <summary>The part of a signal in which its ringing is fitted, and the strongest mode found there.</summary>
/// <remarks>
/// It starts one period after the first extremum of the diode's voltage: at the extremum itself the tail of the
/// recovery and the nonlinear capacitance still act, and damping comes out 6 to 27 % too high. It ends where the
/// envelope is within the noise or below 1 % of the first swing, or at the next edge. The period is that of a one-mode
/// fit over six periods. What can go wrong: a tail that lasts longer than a period, or a capacitance that still changes
/// there, adds to the damping; the next edge may leave fewer than two periods, which is a reason.
/// </remarks>
public sealed class RingWindow
{
    private const double EndPart = 0.01;
    private const double EndNoise = 2;
    private const double ProminencePart = 0.005;
    private const double ProminenceNoise = 5;
    private const double FirstPeriods = 6;
    private const double FewestPeriods = 2;
    private const string NoRinging = "no ringing found";

    private RingWindow(string? reason) => Reason = reason;

    /// <summary>Why there is no ringing; null where there is a mode.</summary>
    public string? Reason { get; private set; }

    /// <summary>Position of the first extremum, in samples.</summary>
    public double Extremum { get; private init; }

    /// <summary>Period of the ringing over its first six periods, in samples.</summary>
    public double Period { get; private init; }

    /// <summary>Start of the window, in samples.</summary>
    public double From { get; private set; }

    /// <summary>End of the window, in samples.</summary>
    public double To { get; private set; }

    /// <summary>The strongest mode: the largest A²/σ among those damped less than 0.3. Its amplitude is that at
    /// <see cref="From"/>, its phase that at the first sample from there on.</summary>
    public RingMode Mode { get; private set; }

    /// <summary>The ringing of a voltage after it rises through the bus.</summary>
    /// <param name="voltage">The voltage, V, uniform, finite.</param>
    /// <param name="dt">Sample interval, s; above 0.</param>
    /// <param name="bus">Bus voltage, V.</param>
    /// <param name="sigma">Noise of the voltage (σ), V.</param>
    /// <param name="from">Departure of the edge, in samples.</param>
    /// <param name="to">The next edge, or the record's end, in samples.</param>
    /// <returns>Window and mode, or a reason: no maximum above the bus with another behind it, no damped cosine in the
    /// first six periods, fewer than two periods left, no ringing found.</returns>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    public static RingWindow AboveBus(
        ReadOnlySpan<double> voltage, double dt, double bus, double sigma, double from, double to)
    {
        double prominence = Math.Max(ProminenceNoise * sigma, ProminencePart * Math.Abs(bus));
        Extremes maxima = new(voltage, prominence, minima: false, (int)Math.Ceiling(from), (int)Math.Floor(to));
        int first = -1;
        int second = -1;
        while (second < 0 && maxima.Next())
        {
            if (first >= 0)
            {
                second = maxima.Sample;
            }
            else if (voltage[maxima.Sample] > bus)
            {
                first = maxima.Sample;
            }
        }

        if (second < 0)
        {
            return new RingWindow("no ringing above the bus");
        }

        Peak peak = Peak.Vertex(voltage, first);
        RingEnvelope? start = FirstMode(voltage, dt, peak.Position, second - first, to, out string? reason);
        if (start is not { } mode)
        {
            return new RingWindow(reason ?? NoRinging);
        }

        RingWindow window = new((string?)null) { Extremum = peak.Position, Period = 1 / (mode.Frequency * dt) };
        window.Fit(voltage, dt, mode, peak.Height - bus, sigma, to);
        return window;
    }

    /// <summary>The ringing of a current from the same instant on; its first swing is its envelope at the
    /// extremum.</summary>
    /// <param name="current">The current, A, uniform, finite.</param>
    /// <param name="dt">Sample interval, s; above 0.</param>
    /// <param name="voltage">The window of the voltage that rings with it.</param>
    /// <param name="sigma">Noise of the current (σ), A.</param>
    /// <param name="to">The next edge, or the record's end, in samples.</param>
    /// <returns>Window and mode, or a reason; that of the voltage where it does not ring.</returns>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    public static RingWindow Along(
        ReadOnlySpan<double> current, double dt, RingWindow voltage, double sigma, double to)
    {
        ArgumentNullException.ThrowIfNull(voltage);
        if (!(voltage.Period > 0))
        {
            return new RingWindow(voltage.Reason);
        }

        RingEnvelope? start = FirstMode(current, dt, voltage.Extremum, voltage.Period, to, out string? reason);
        if (start is not { } mode)
        {
            return new RingWindow(reason ?? NoRinging);
        }

        RingWindow window = new((string?)null) { Extremum = voltage.Extremum, Period = voltage.Period };
        window.Fit(current, dt, mode, mode.Amplitude, sigma, to);
        return window;
    }

    /// <summary>A number of the mode as a reading over the window.</summary>
    /// <param name="value">The number.</param>
    public Reading Read(Func<RingMode, double> value)
    {
        ArgumentNullException.ThrowIfNull(value);
        return Reason is null ? Reading.Of(value(Mode), From, To) : Reading.None(Reason);
    }

    private static RingEnvelope? FirstMode(
        ReadOnlySpan<double> signal, double dt, double extremum, double period, double to, out string? reason)
    {
        double end = Math.Min(extremum + (FirstPeriods * period), Math.Min(to, signal.Length - 1));
        if (end - extremum < FewestPeriods * period)
        {
            reason = "ringing window too short";
            return null;
        }

        int first = (int)Math.Ceiling(extremum);
        reason = NoRinging;
        return RingEnvelope.Fit(signal[first..((int)end + 1)], dt, period) is { } mode
            ? mode with { Amplitude = mode.Amplitude * Math.Exp(mode.Decay * (first - extremum) * dt) }
            : null;
    }

    private void Fit(ReadOnlySpan<double> signal, double dt, RingEnvelope first, double swing, double sigma, double to)
    {
        double least = Math.Max(EndNoise * sigma, EndPart * swing);
        double decayed = Extremum + (Math.Log(first.Amplitude / least) / (first.Decay * dt));
        From = Extremum + Period;
        To = Math.Min(decayed, Math.Min(to, signal.Length - 1));
        if (!(To - From >= FewestPeriods * Period))
        {
            Reason = "ringing window too short";
            return;
        }

        int start = (int)Math.Ceiling(From);
        RingFitResult fit = RingThinning.Fit(signal[start..((int)To + 1)], dt, Period, RingFit.MostModes);
        if (fit.Strongest is { IsRinging: true } strongest)
        {
            // The first sample lies up to one interval after the start, and the envelope has fallen since.
            double since = Math.Exp(strongest.Decay * (start - From) * dt);
            Mode = strongest with
            {
                Amplitude = strongest.Amplitude * since,
                AmplitudeUncertainty = strongest.AmplitudeUncertainty * since,
            };
        }
        else
        {
            Reason = fit.Reason ?? NoRinging;
        }
    }
}
