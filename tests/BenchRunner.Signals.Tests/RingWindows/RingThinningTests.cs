using BenchRunner.Signals.Ringing;
using BenchRunner.Signals.RingWindows;
using BenchRunner.Signals.Tests.Ringing;

namespace BenchRunner.Signals.Tests.RingWindows;

/// <summary>A ring of far more samples than it needs, fitted on means of them, against the closed form and against the
/// fit of the samples themselves.</summary>
public sealed class RingThinningTests
{
    private const double Bus = 400;
    private const double Swing = 80;
    private const double Frequency = 40e6;
    private const double Damping = 0.03;
    private const double Start = 50e-9;
    private const double Duration = 900e-9;

    private static readonly double _turn = 2 * Math.PI * Frequency;
    private static readonly double _decay = Damping * _turn / Math.Sqrt(1 - (Damping * Damping));

    [Theory]
    [InlineData(1e-9)]
    [InlineData(100e-12)]
    [InlineData(20e-12)]
    public void Frequency_damping_and_amplitude_are_those_of_the_record_at_any_rate(double dt)
    {
        RingWindow ring = RingWindow.AboveBus(Voltage(dt, noise: 0), dt, Bus, 0, 0, (Duration / dt) - 1);
        Assert.Null(ring.Reason);
        Assert.Equal(Frequency, ring.Mode.Frequency, 1e-7 * Frequency);
        Assert.Equal(Damping, ring.Mode.Damping, 1e-6);
        double envelope = Swing * Math.Exp(-_decay * ((ring.From * dt) - Start));
        Assert.Equal(envelope, ring.Mode.Amplitude, 1e-6 * envelope);
    }

    [Fact]
    public void Means_of_a_noisy_record_cost_next_to_nothing_of_what_its_samples_hold()
    {
        const double Dt = 50e-12, Noise = 4;
        double[] voltage = Voltage(Dt, Noise);
        RingWindow ring = RingWindow.AboveBus(voltage, Dt, Bus, Noise, 0, voltage.Length - 1);
        RingMode whole = RingFit.Fit(
            voltage.AsSpan((int)Math.Ceiling(ring.From)..((int)ring.To + 1)), Dt, 1).Modes[0];
        Assert.InRange(ring.Mode.FrequencyUncertainty / whole.FrequencyUncertainty, 0.9, 1.05);
        Assert.InRange(ring.Mode.DampingUncertainty / whole.DampingUncertainty, 0.9, 1.05);
        Assert.Equal(whole.Frequency, ring.Mode.Frequency, 0.15 * whole.FrequencyUncertainty);
        Assert.Equal(whole.Damping, ring.Mode.Damping, 0.15 * whole.DampingUncertainty);
        Assert.Equal(whole.Amplitude, ring.Mode.Amplitude, 0.15 * whole.AmplitudeUncertainty);
    }

    private static double[] Voltage(double dt, double noise)
    {
        double[] normal = RingRecord.Noise(7, (int)(Duration / dt));
        return
        [
            .. normal.Select((random, i) =>
            {
                double t = (i * dt) - Start;
                double clean = t < 0
                    ? Bus * Math.Max(0, 1 + (t / 10e-9))
                    : Bus + (Swing * Math.Exp(-_decay * t) * Math.Sin(_turn * t));
                return clean + (noise * random);
            }),
        ];
    }
}
