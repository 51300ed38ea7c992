using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Ringing;
using BenchRunner.Signals.RingWindows;
using Complex = System.Numerics.Complex;

namespace BenchRunner.Signals.Corrections;

/// <summary>Where the drain rings after a turn-off, for <see cref="GateRing"/>: from its highest sample on.</summary>
/// <param name="Peak">The highest sample after the edge.</param>
/// <param name="To">The last sample of the window.</param>
/// <param name="Poles">Of each mode −σ + iω, a sample; the strongest ringing one first.</param>
/// <remarks>A shorter start and a later end than those of the ring's own quantities (ring/fit): a strongly damped ring
/// leaves little, and the frequency that still moves there moves in both channels.</remarks>
internal readonly record struct GateWindow(int Peak, int To, Complex[] Poles)
{
    private const double FirstPeriods = 6;
    private const double FewestPeriods = 4;
    private const double EndNoise = 0.5;
    private const double LeastNoise = 1e-3;
    private const double HysteresisNoise = 3;

    /// <summary>From the highest sample to where the capacitance has settled enough, in periods.</summary>
    public const double Start = 0.5;

    /// <summary>The largest skew that is looked for, in periods: beyond it the gate's part of the window would reach the
    /// next edge.</summary>
    public const double Widest = 1.5;

    /// <summary>Finds it between two edges; null where nothing rings.</summary>
    public static GateWindow? Find(double[] vds, double dt, double noise, int from, int to)
    {
        int peak = from;
        for (int i = from; i < to; i++)
        {
            peak = vds[i] > vds[peak] ? i : peak;
        }

        double rest = Mean(vds.AsSpan(((peak + to) / 2)..to));
        double hysteresis = HysteresisNoise * noise;
        if (Crossing.First(vds, rest, hysteresis, CrossingDirection.Falling, peak, to) is not { } down
            || Crossing.First(vds, rest, hysteresis, CrossingDirection.Rising, down, to) is not { } up)
        {
            return null;
        }

        int first = (int)Math.Min(peak + (FirstPeriods * 2 * (up - down)), to);
        if (RingEnvelope.Fit(vds.AsSpan(peak..first), dt, 2 * (up - down)) is not { } envelope)
        {
            return null;
        }

        double period = 1 / (envelope.Frequency * dt);
        double least = EndNoise * Math.Max(noise, LeastNoise * envelope.Amplitude);
        double decayed = Math.Log(Math.Max(1, envelope.Amplitude / least)) / (envelope.Decay * dt);
        int last = (int)Math.Min(peak + Math.Max(decayed, FewestPeriods * period), to - 1 - (Widest * period));
        int start = (int)Math.Ceiling(peak + (Start * period));
        if (start >= last)
        {
            return null;
        }

        RingFitResult ring = RingThinning.Fit(vds.AsSpan(start..(last + 1)), dt, period, RingFit.MostModes);
        return ring.Strongest is { IsRinging: true }
            ? new GateWindow(peak, last, [.. ring.Modes.Select(mode => Pole(mode, dt))])
            : null;
    }

    /// <summary>Period of the ringing, samples.</summary>
    public double Period => 2 * Math.PI / Poles[0].Imaginary;

    private static Complex Pole(RingMode mode, double dt) => new(-mode.Decay * dt, 2 * Math.PI * mode.Frequency * dt);

    private static double Mean(ReadOnlySpan<double> samples)
    {
        double sum = 0;
        foreach (double sample in samples)
        {
            sum += sample;
        }

        return sum / samples.Length;
    }
}
