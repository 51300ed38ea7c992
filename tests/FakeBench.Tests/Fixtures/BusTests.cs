using CsCheck;
using FakeBench.Fixtures;

namespace FakeBench.Tests.Fixtures;

public sealed class BusTests
{
    private const double Capacitance = 50e-6;
    private const double None = double.PositiveInfinity;

    [Fact]
    public void A_bank_discharges_through_its_bleeder()
    {
        var bus = new Bus();
        bus.SetVoltage(600);
        var circuit = new BusCircuit(Capacitance, 1 / 5e3, 4, 2.5, Connected: false);
        bus.Advance(circuit, 0, 7500, 0.631, None);
        // V = V0 e^(-t/RC): 600 V to 48 V with 5 kOhm and 50 uF takes 0.25 s ln(12.5) = 0.631 s.
        Near(600 * Math.Exp(-0.631 / 0.25), bus.Voltage);
        Assert.InRange(bus.Voltage, 47.9, 48.1);
    }

    [Fact]
    public void A_current_limit_charges_by_I_t_over_C()
    {
        var bus = new Bus();
        bus.Advance(new BusCircuit(Capacitance, 0, 4, 0.1, Connected: true), 600, 1e6, 0.1, None);
        // 0.1 A for 0.1 s is 10 mC: 200 V on 50 uF; the first microseconds, in which the source rises, cost 0.4 uC.
        Assert.Equal(200, bus.Voltage, 0.01);
    }

    [Fact]
    public void A_settled_bus_stands_at_what_the_divider_gives()
    {
        var bus = new Bus();
        var circuit = new BusCircuit(Capacitance, 1 / 5e3, 4, 2.5, Connected: true);
        bus.Advance(circuit, 600, 7500, 1, None);
        Assert.True(bus.AtRest);
        Assert.Equal(600 / (1 + (4 / 5e3)), bus.Voltage);
        Near(600 / 5004.0, Bus.Current(circuit, bus.Source, bus.Voltage));
    }

    [Fact]
    public void It_stops_where_a_threshold_is_reached()
    {
        var bus = new Bus();
        var circuit = new BusCircuit(Capacitance, 0, 4, 2.5, Connected: true);
        double moved = bus.Advance(circuit, 600, 7500, 1, 300);
        Assert.Equal(300, bus.Voltage, 1e-6);
        Assert.InRange(moved, 300 / 7500.0, (300 / 7500.0) + 1e-3);
    }

    [Fact]
    public void The_closed_form_agrees_with_small_steps() =>
        Gen.Select(Gen.Double[0, 700], Gen.Double[0, 800], Gen.Double[1e-7, 1e-2], Gen.Double[0.05, 3], Gen.Bool)
            .Sample((start, target, conductance, limit, connected) =>
            {
                var circuit = new BusCircuit(Capacitance, conductance, 4, limit, connected);
                var bus = new Bus();
                bus.SetVoltage(start);
                bus.Advance(circuit, target, 7500, 0.02, None);
                double expected = Euler(circuit, start, target, 0.02);
                Assert.True(Math.Abs(expected - bus.Voltage) < 0.05, $"{bus.Voltage}, small steps {expected}");
            }, iter: 50);

    [Fact]
    public void Whoever_looks_in_between_changes_nothing_once_it_has_settled() =>
        Gen.Double[1e-4, 0.02].List[1, 40].Sample(looks =>
        {
            var circuit = new BusCircuit(Capacitance, 1 / 6e6, 4, 2.5, Connected: true);
            var looked = new Bus();
            looks.ForEach(s => looked.Advance(circuit, 600, 7500, s, None));
            looked.Advance(circuit, 600, 7500, 1, None);
            var alone = new Bus();
            alone.Advance(circuit, 600, 7500, 1, None);
            Assert.Equal(alone.Voltage, looked.Voltage);
        }, iter: 100);

    // An independent way: explicit steps of 0.2 us, a thousandth of the shortest time constant (4 Ohm, 50 uF: 200 us).
    private static double Euler(BusCircuit circuit, double start, double target, double duration)
    {
        const double step = 0.2e-6;
        (double voltage, double source) = (start, 0);
        for (int i = 0; i < duration / step; i++)
        {
            double current = Bus.Current(circuit, source, voltage);
            voltage += step * (current - (circuit.Conductance * voltage)) / circuit.Capacitance;
            source = Math.Min(source + (7500 * step), target);
        }

        return voltage;
    }

    private static void Near(double expected, double actual) =>
        Assert.True(Math.Abs(actual - expected) <= 1e-9 * Math.Abs(expected), $"{actual}, expected {expected}");
}
