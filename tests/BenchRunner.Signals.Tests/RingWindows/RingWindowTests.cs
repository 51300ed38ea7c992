using BenchRunner.Signals.RingWindows;

namespace BenchRunner.Signals.Tests.RingWindows;

/// <summary>Windows on damped cosines above a bus of 600 V, whose values at any time are known in closed form.</summary>
public sealed class RingWindowTests
{
    private const double Dt = 1e-9;
    private const double Bus = 600;
    private const double Swing = 200;
    private const double Frequency = 35e6;
    private const double Decay = 9e6;

    /// <summary>The first maximum of the ring, in samples; before it the voltage rises from 0 V.</summary>
    private const double Maximum = 40;

    [Theory]
    [InlineData(0)]
    [InlineData(0.25)]
    [InlineData(0.5)]
    [InlineData(0.9)]
    public void The_amplitude_is_that_at_the_start_wherever_the_samples_fall(double shift)
    {
        double[] voltage = [.. Enumerable.Range(0, 900).Select(n => Voltage(n - shift))];

        RingWindow window = RingWindow.AboveBus(voltage, Dt, Bus, 0.01, 0, voltage.Length - 1);

        Assert.Null(window.Reason);
        Assert.Equal(Frequency, window.Mode.Frequency, Frequency * 1e-9);
        // The cosine's envelope, and a period after the maximum that was found.
        double expected = Swing * Math.Exp(-Decay * (window.From - shift - Maximum) * Dt);
        Assert.Equal(expected, window.Mode.Amplitude, expected * 1e-8);
        Assert.Equal(window.Extremum + (1 / (Frequency * Dt)), window.From, 1e-6);
    }

    [Fact]
    public void The_window_ends_where_the_envelope_is_one_percent_of_the_first_swing()
    {
        double[] voltage = [.. Enumerable.Range(0, 900).Select(n => Voltage(n))];

        RingWindow window = RingWindow.AboveBus(voltage, Dt, Bus, 0.01, 0, voltage.Length - 1);

        // ln 100 time constants after the maximum; the swing is read at a maximum a little before the envelope's.
        Assert.Equal(Maximum + (Math.Log(100) / (Decay * Dt)), window.To, 1.0);
    }

    [Fact]
    public void The_window_ends_where_the_envelope_is_twice_the_noise()
    {
        double[] voltage = [.. Enumerable.Range(0, 900).Select(n => Voltage(n))];

        RingWindow window = RingWindow.AboveBus(voltage, Dt, Bus, 5, 0, voltage.Length - 1);

        Assert.Equal(Maximum + (Math.Log(Swing / 10) / (Decay * Dt)), window.To, 1e-6);
    }

    [Fact]
    public void The_next_edge_ends_the_window_or_leaves_too_little()
    {
        double[] voltage = [.. Enumerable.Range(0, 900).Select(n => Voltage(n))];

        Assert.Equal(200, RingWindow.AboveBus(voltage, Dt, Bus, 0.01, 0, 200).To);
        Assert.Equal("ringing window too short", RingWindow.AboveBus(voltage, Dt, Bus, 0.01, 0, 110).Reason);
    }

    [Fact]
    public void The_current_is_fitted_from_the_same_instant_on()
    {
        double[] voltage = [.. Enumerable.Range(0, 900).Select(n => Voltage(n))];
        double[] current = [.. voltage.Select(v => 50 + ((v - Bus) / 20))];
        RingWindow above = RingWindow.AboveBus(voltage, Dt, Bus, 0.01, 0, voltage.Length - 1);

        RingWindow along = RingWindow.Along(current, Dt, above, 0.001, current.Length - 1);

        Assert.Equal(above.From, along.From);
        Assert.Equal(above.Mode.Amplitude / 20, along.Mode.Amplitude, above.Mode.Amplitude * 1e-8);
    }

    private static double Voltage(double n)
    {
        double t = (n - Maximum) * Dt;
        return t < -0.25 / Frequency
            ? 0
            : Bus + (Swing * Math.Exp(-Decay * t) * Math.Cos(2 * Math.PI * Frequency * t));
    }
}
