using FakeBench.Physics;

namespace FakeBench.Tests.Physics;

/// <summary>
/// The nominal part at its rated point, 600 V and 40 A. The expected numbers are those of a separate prototype of the
/// same
/// circuit, solved by another program (LSODA gave it the same peaks): means of its population of 1,000.
/// </summary>
public sealed class NominalPartTests
{
    private static readonly PulseTrain Rated = new(8.08e-6, 6e-6, 3e-6, 18, -4, 600);
    private static readonly Waveforms Train =
        Waveforms.Of(HalfBridge.Simulate(CircuitParameters.Nominal, Rated, -0.5e-6, 0.1e-9, 200_000));

    [Fact]
    public void Load_current_is_40_A_when_the_second_pulse_starts() =>
        Approximately.Equal(40, Train.Mean(Signal.ILoad, Rated.On2 - 50e-9, Rated.On2), 0.01);

    [Fact]
    public void Reverse_recovery_peaks_at_40_9_A() =>
        Approximately.Equal(40.9, Train.Max(Signal.IdHigh, Rated.On2, Rated.Off2), 0.01);

    [Fact]
    public void Reverse_recovery_charge_is_666_nC()
    {
        double t0 = Train.Crossing(Signal.IdHigh, 0, Rated.On2, rising: true);
        double irm = Train.Max(Signal.IdHigh, Rated.On2, Rated.Off2);
        double peak = Train.Crossing(Signal.IdHigh, 0.9999 * irm, t0, rising: true);
        double at90 = Train.Crossing(Signal.IdHigh, 0.9 * irm, peak, rising: false);
        double at25 = Train.Crossing(Signal.IdHigh, 0.25 * irm, peak, rising: false);
        double end = at25 + (at25 - at90) * 0.25 / 0.65;

        Approximately.Equal(666e-9, Train.Integral(i => Train[Signal.IdHigh][i], t0, end), 0.02);
        Approximately.Equal(27.5e-9, end - t0, 0.02);
    }

    [Fact]
    public void Turn_on_costs_623_uJ_and_turn_off_143_uJ()
    {
        double bus = Train.Mean(Signal.Vbus, Rated.On2 - 200e-9, Rated.On2);
        double on = Train.Mean(Signal.VdsLow, 0.9 * Rated.Off1, Rated.Off1);
        double level = on + 0.1 * (bus - on);
        double eon = Train.EnergyLow(
            Train.Crossing(Signal.IdLow, 4, Rated.On2, rising: true),
            Train.Crossing(Signal.VdsLow, level, Rated.On2, rising: false));
        double eoff = Train.EnergyLow(
            Train.Crossing(Signal.VdsLow, level, Rated.Off1, rising: true),
            Train.Crossing(Signal.IdLow, 4, Rated.Off1, rising: false));

        Approximately.Equal(623e-6, eon, 0.02);
        Approximately.Equal(142.6e-6, eoff, 0.02);
    }

    [Fact]
    public void Peaks_are_724_V_at_turn_off_and_81_8_A_and_837_V_at_turn_on()
    {
        Approximately.Equal(724, Train.Max(Signal.VdsLow, Rated.Off1, Rated.On2), 0.005);
        Approximately.Equal(81.8, Train.Max(Signal.IdLow, Rated.On2, Rated.Off2), 0.01);
        Approximately.Equal(837, Train.Max(Signal.VdsHigh, Rated.On2, Rated.Off2), 0.01);
    }

    [Fact]
    public void It_rings_at_41_9_MHz_with_a_damping_of_0_054()
    {
        var maxima = Train.Maxima(Signal.VdsHigh, Rated.On2 + 60e-9, 600, 7);
        double period = (maxima[^1].At - maxima[0].At) / (maxima.Count - 1);
        double bus = Train.Mean(Signal.VdsHigh, Rated.On2 + 0.8e-6, Rated.On2 + 1e-6);
        double decrement = Math.Log((maxima[0].Value - bus) / (maxima[^1].Value - bus)) / (maxima.Count - 1);

        Approximately.Equal(41.9e6, 1 / period, 0.01);
        Approximately.Equal(0.0538, decrement / Math.Sqrt(4 * Math.PI * Math.PI + decrement * decrement), 0.05);
    }

    [Fact]
    public void A_proving_train_at_60_V_and_4_A_shows_charge_of_the_output_capacitance_above_all()
    {
        var proving = new PulseTrain(8.08e-6, 6e-6, 3e-6, 18, -4, 60);
        var w = Waveforms.Of(HalfBridge.Simulate(CircuitParameters.Nominal, proving, -0.5e-6, 0.2e-9, 100_000));

        Approximately.Equal(15, w.Max(Signal.IdHigh, proving.On2, proving.Off2), 0.03);
        Approximately.Equal(161, w.Max(Signal.VdsHigh, proving.On2, proving.Off2), 0.01);
        Approximately.Equal(19, w.Max(Signal.IdLow, proving.On2, proving.Off2), 0.03);
    }

    [Fact]
    public void What_the_train_takes_from_the_bank_is_in_load_and_losses()
    {
        var end = HalfBridge.Simulate(CircuitParameters.Nominal, Rated, 0, 1e-9, 10).End;
        double taken = 0.5 * 50e-6 * (600 * 600 - end.BankVoltageAfter * end.BankVoltageAfter);
        double stored = 0.5 * 120e-6 * end.LoadCurrent * end.LoadCurrent;

        // Two turn-ons (600 V on no current, and on 40 A), two turn-offs, conduction: a few mJ of 180.
        Assert.InRange(taken - stored, 1e-3, 8e-3);
    }

    [Fact]
    public void Kirchhoff_holds_in_every_sample()
    {
        for (int i = 0; i < Train.Points; i += 7)
        {
            double left = Train[Signal.IdLow][i];
            Assert.Equal(left, Train[Signal.ILoad][i] + Train[Signal.IdHigh][i], 1e-9);
        }
    }
}
