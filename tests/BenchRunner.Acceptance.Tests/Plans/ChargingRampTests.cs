using BenchRunner.Acceptance.Plans;
using CsCheck;

namespace BenchRunner.Acceptance.Tests.Plans;

public sealed class ChargingRampTests
{
    [Fact]
    public void Without_losses_the_pulse_is_inductance_times_current_over_voltage() =>
        // Closed form: 4 µH · 25 A / 20 V = 5 µs.
        Assert.Equal(5e-6, new ChargingRamp(20, 4e-6, 0, double.PositiveInfinity).TimeTo(25)!.Value, 5e-6 * 1e-9);

    [Fact]
    public void Resistance_makes_the_ramp_an_exponential()
    {
        // Closed form: t = −L/R ln(1 − I R/V).
        double expected = -120e-6 / 0.05 * Math.Log(1 - (40 * 0.05 / 600));
        Assert.Equal(expected, new ChargingRamp(600, 120e-6, 0.05, double.PositiveInfinity).TimeTo(40)!.Value,
            1e-9 * expected);
    }

    [Fact]
    public void A_bank_makes_it_a_sine_and_droops_by_the_charge_it_gave()
    {
        // Closed form without resistance: i = V √(C/L) sin(t/√(LC)), droop = V (1 − cos(t/√(LC))).
        double root = Math.Sqrt(120e-6 * 50e-6);
        double expected = root * Math.Asin(40 / (600 * Math.Sqrt(50e-6 / 120e-6)));
        var ramp = new ChargingRamp(600, 120e-6, 0, 50e-6);
        Assert.Equal(expected, ramp.TimeTo(40)!.Value, 1e-9 * expected);
        double droop = 600 * (1 - Math.Cos(expected / root));
        Assert.Equal(droop, ramp.DroopAt(expected), 1e-6 * droop);
    }

    [Fact]
    public void A_current_beyond_bank_or_resistance_is_never_reached()
    {
        Assert.Null(new ChargingRamp(20, 1e-3, 1, double.PositiveInfinity).TimeTo(20.5));
        Assert.Null(new ChargingRamp(20, 1e-3, 0, 1e-6).TimeTo(1));
    }

    [Fact]
    public void The_time_found_is_where_the_current_is_and_grows_with_every_loss() =>
        Gen.Select(Gen.Double[10, 1000], Gen.Double[1e-6, 1e-3], Gen.Double[0, 0.5], Gen.Double[10e-6, 1e-3],
            Gen.Double[1, 100])
            .Sample((voltage, inductance, resistance, capacitance, current) =>
            {
                var ramp = new ChargingRamp(voltage, inductance, resistance, capacitance);
                if (ramp.TimeTo(current) is { } time)
                {
                    Assert.Equal(current, ramp.CurrentAt(time), 1e-9 * current);
                    Assert.True(time >= inductance * current / voltage * (1 - 1e-12));
                    Assert.True(ramp.SlopeAt(time) > 0);
                }
            });
}
