using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Support;

/// <summary>A pulse train of smooth edges, known at every time: it can be sampled as finely as one likes.</summary>
/// <param name="CurrentRise">10 % to 90 % of the current at turn-on, s.</param>
/// <param name="VoltageFall">90 % to 10 % of the voltage at turn-on, s.</param>
/// <param name="VoltageRise">10 % to 90 % of the voltage at turn-off, s.</param>
/// <param name="CurrentFall">90 % to 10 % of the current at turn-off, s.</param>
/// <param name="Recovery">Peak of the recovery current over the load's.</param>
/// <remarks>400 V on 100 µH: 20 A after the first pulse of 5 µs. Edges are hyperbolic tangents, whose 10 % to 90 % is
/// 2 artanh 0.8 times their width.</remarks>
internal sealed record SmoothTrain(
    double CurrentRise, double VoltageFall, double VoltageRise, double CurrentFall, double Recovery)
{
    private const double Bus = 400;
    private const double On = 2;
    private const double Slope = 4e6;
    private const double On1 = 0.6e-6;
    private const double Off1 = 5.6e-6;
    private const double On2 = 8.6e-6;
    private const double Off2 = 10.2e-6;
    private const double End = 10.8e-6;
    private const double Gate = 30e-9;

    /// <summary>Samples the train.</summary>
    /// <param name="interval">Sample interval, s.</param>
    /// <param name="origin">Time of the first sample, s.</param>
    public Waveform Sample(double interval, double origin) => new(origin, interval, new Dictionary<Channel, double[]>
    {
        [Channel.VgsLow] = Over(interval, origin, t => 12 * Pulses(t, 0, Gate, 0, Gate)),
        [Channel.VdsLow] = Over(interval, origin, t => Bus - ((Bus - On) * Voltage(t))),
        [Channel.IdLow] = Over(interval, origin, Current),
        [Channel.Vbus] = Over(interval, origin, _ => Bus),
    });

    private double Voltage(double t) =>
        Pulses(t, Gate + (2 * CurrentRise) + VoltageFall, VoltageFall, Gate + VoltageRise, VoltageRise);

    private double Current(double t)
    {
        double load = (Slope * (Math.Clamp(t, On1, Off1) - On1)) + (Slope * (Math.Clamp(t, On2, Off2) - On2));
        double flows = Pulses(
            t, Gate + CurrentRise, CurrentRise, Gate + (2 * VoltageRise) + CurrentFall, CurrentFall);
        double away = (t - (On2 + Gate + (2.5 * CurrentRise))) / CurrentRise;
        return (load * flows) + (Recovery * Slope * (Off1 - On1) * Math.Exp(-away * away));
    }

    /// <summary>0 before and after, 1 during both pulses; each edge late, and as long as stated.</summary>
    private static double Pulses(double t, double onLate, double rise, double offLate, double fall) =>
        Step(t - On1 - onLate, rise) - Step(t - Off1 - offLate, fall)
        + Step(t - On2 - onLate, rise) - Step(t - Off2 - offLate, fall);

    private static double Step(double t, double duration) =>
        (1 + Math.Tanh(t / duration * 2 * Math.Atanh(0.8))) / 2;

    private static double[] Over(double interval, double origin, Func<double, double> of)
    {
        double[] samples = new double[(int)((End - origin) / interval)];
        for (int i = 0; i < samples.Length; i++)
        {
            samples[i] = of(origin + (i * interval));
        }

        return samples;
    }
}
