using FakeBench.Physics;

namespace FakeBench.Tests.Physics;

/// <summary>
/// The solver against a general-purpose circuit simulator that solved the same circuits (tests/reference/waveforms, its
/// values from points of 50 ps or closer). The transistor's and the diode's equations are the same on both sides; what
/// is
/// held is the formulation, the solver and the sampling.
/// </summary>
public sealed class ReferenceCircuitTests
{
    /// <remarks>In "saturating" the deck's transistor has a second, charge-free diode that takes over 0.6 % of the
    /// current at the forward drop of 1.62 V reached there; ours has none, and stores that much more charge.</remarks>
    [Theory]
    [InlineData("lv40", 0.006)]
    [InlineData("hv650soft", 0.003)]
    [InlineData("saturating", 0.013)]
    public void Peaks_and_recovery_agree_with_a_circuit_simulator(string name, double recovery)
    {
        var circuit = ReferenceCircuit.Of(name);
        var train = circuit.Train;
        var w = circuit.Solve(0.1e-9);
        double irm = w.Max(Signal.IdHigh, train.On2, train.Off2);
        double t0 = w.Crossing(Signal.IdHigh, 0, train.On2, rising: true);
        double qrr = w.Integral(i => w[Signal.IdHigh][i], t0, t0 + 50e-9);

        Approximately.Equal(ReferenceFiles.Truth(name, "irm", "peak/above-load"), irm, recovery);
        Approximately.Equal(ReferenceFiles.Truth(name, "qrr", "qrr/window-50ns"), qrr, recovery);
        Approximately.Equal(ReferenceFiles.Truth(name, "vds_peak_off", "peak/raw"),
            w.Max(Signal.VdsLow, train.Off1, train.On2), 0.002);
        Approximately.Equal(ReferenceFiles.Truth(name, "id_peak_on", "peak/raw"),
            w.Max(Signal.IdLow, train.On2, train.Off2), 0.006);
        Approximately.Equal(ReferenceFiles.Truth(name, "vds_high_peak_1", "peak/ring"),
            w.Max(Signal.VdsHigh, train.On2, train.Off2), 0.002);
    }

    [Theory]
    [InlineData("lv40")]
    [InlineData("hv650soft")]
    [InlineData("saturating")]
    public void Switching_energies_agree_with_a_circuit_simulator(string name)
    {
        var circuit = ReferenceCircuit.Of(name);
        var train = circuit.Train;
        var w = circuit.Solve(0.1e-9);
        double bus = w.Mean(Signal.Vbus, train.On2 - 200e-9, train.On2);
        double on = w.Mean(Signal.VdsLow, train.Off1 - 0.1 * train.FirstPulse, train.Off1);
        double level = on + 0.1 * (bus - on);
        double iOn = ReferenceFiles.Truth(name, "i_on", "iload/ramp");
        double iOff = ReferenceFiles.Truth(name, "i_off", "iload/ramp");
        double eon = w.EnergyLow(
            w.Crossing(Signal.IdLow, 0.1 * iOn, train.On2, rising: true),
            w.Crossing(Signal.VdsLow, level, train.On2, rising: false));
        double eoff = w.EnergyLow(
            w.Crossing(Signal.VdsLow, level, train.Off1, rising: true),
            w.Crossing(Signal.IdLow, 0.1 * iOff, train.Off1, rising: false));

        Approximately.Equal(ReferenceFiles.Truth(name, "bus_voltage", "levels/window"), bus, 0.0005);
        Approximately.Equal(ReferenceFiles.Truth(name, "eon", "e/10-10"), eon, 0.006);
        Approximately.Equal(ReferenceFiles.Truth(name, "eoff", "e/10-10"), eoff, 0.008);
    }

    [Theory]
    [InlineData("lv40")]
    [InlineData("hv650soft")]
    [InlineData("saturating")]
    public void Ringing_agrees_with_a_circuit_simulator_period_by_period(string name)
    {
        var circuit = ReferenceCircuit.Of(name);
        var reference = ReferenceFiles.Clean(name, ReferenceCircuit.On1);
        double bus = circuit.Train.BusVoltage;
        var ours = circuit.Solve(reference.Interval).Maxima(Signal.VdsHigh, circuit.Train.On2, bus, 5);
        var theirs = reference.Maxima(Signal.VdsHigh, circuit.Train.On2, bus, 5);

        for (int i = 1; i < 5; i++) Approximately.Equal(theirs[i].At - theirs[0].At, ours[i].At - ours[0].At, 0.005);
        for (int i = 0; i < 5; i++) Approximately.Equal(theirs[i].Value, ours[i].Value, 0.004);
    }

    [Theory]
    [InlineData("lv40")]
    [InlineData("hv650soft")]
    [InlineData("saturating")]
    public void Every_sample_of_every_signal_lies_on_the_circuit_simulators_waveform(string name)
    {
        var circuit = ReferenceCircuit.Of(name);
        var reference = ReferenceFiles.Clean(name, ReferenceCircuit.On1);
        var ours = circuit.Solve(reference.Interval);
        // Edges of 10 to 40 V/ns: 0.3 ns of time are up to 3 % of the span, and the turn-off comes that much early,
        // since
        // the current through the drain resistance is taken not to change while the gate-drain capacitance charges.
        const double allowed = 0.04;
        for (int s = 0; s < ours.Signals.Length; s++)
        {
            double span = reference.Signals[s].Max() - reference.Signals[s].Min();
            double worst = 0;
            for (int i = 0; i < Math.Min(ours.Points, reference.Points); i++)
            {
                worst = Math.Max(worst, Math.Abs(ours.Signals[s][i] - reference.Signals[s][i]));
            }

            Assert.True(worst < allowed * span, $"{(Signal)s} is {worst} away, span {span}.");
        }
    }

    [Fact]
    public void A_short_in_the_high_place_ends_in_the_low_ones_saturation_current()
    {
        var circuit = ReferenceCircuit.Of("shorted");
        var w = circuit.Solve(0.1e-9);

        Approximately.Equal(ReferenceFiles.Truth("shorted", "id_peak_on", "peak/raw"),
            w.Max(Signal.IdLow, circuit.Train.On2, circuit.Train.Off2), 0.005);
        Approximately.Equal(ReferenceFiles.Truth("shorted", "vds_peak_off", "peak/raw"),
            w.Max(Signal.VdsLow, circuit.Train.Off1, circuit.Train.On2), 0.01);
    }
}
