using FakeBench.Physics;

namespace FakeBench.Tests.Physics;

/// <summary>Corners of the circuit where a formula gives the answer.</summary>
public sealed class CircuitTests
{
    private static readonly CircuitParameters Nominal = CircuitParameters.Nominal;
    private static readonly PulseTrain Rated = new(8.08e-6, 6e-6, 3e-6, 18, -4, 600);

    [Fact]
    public void Load_current_rises_as_voltage_over_inductance()
    {
        var w = Solve(Nominal, Rated);
        // u = V - (Rload + Ron) i and L di/dt = u: i = V/R (1 - exp(-t R/L)), between two instants of the first pulse.
        double on = w.Mean(Signal.VdsLow, 7.9e-6, 8e-6) / w.Mean(Signal.IdLow, 7.9e-6, 8e-6);
        double resistance = on + 0.05 + 0.005 + 0.004;
        double early = w.Mean(Signal.ILoad, 3.95e-6, 4.05e-6);
        double late = w.Mean(Signal.ILoad, 7.95e-6, 8.05e-6);
        double decay = Math.Exp(-4e-6 * resistance / 120e-6);
        // The bank falls by half the charge over its capacitance on the way.
        double voltage = 600 - 0.5 * (0.5 * early * 4e-6 + 0.5 * late * 8e-6) / 50e-6;

        Approximately.Equal(early * decay + voltage / resistance * (1 - decay), late, 0.001);
    }

    [Fact]
    public void Bank_falls_by_the_charge_that_the_load_took()
    {
        var w = Solve(Nominal, Rated);
        double charge = w.Integral(i => w[Signal.IdLow][i], 0, 8.05e-6);
        double resistive = 0.004 * w[Signal.IdLow][w.Index(8.05e-6)];
        double inductive = 8e-9 * 600 / 120e-6;
        double recharged = 0.5 * 8.05e-6 * (0.5 * charge / 50e-6 / 20);

        Approximately.Equal((charge - recharged) / 50e-6 + resistive + inductive,
            600 - w[Signal.Vbus][w.Index(8.05e-6)], 0.01);
    }

    [Fact]
    public void Gate_of_a_dead_channel_charges_as_resistor_and_capacitor()
    {
        // No bus, no channel: Rg = 4.7 + 3 Ohm into Cgs + Cgd(vgd), Cgd held constant, so one time constant.
        var gate = Nominal.Low.Switch with
        {
            Transconductance = 0,
            GateDrainMinimum = 0.1e-12,
            GateDrainMaximum = 0.1001e-12,
        };
        var parts = Nominal with
        {
            Bench = Nominal.Bench with { GateInductance = 1e-12, DriverEdge = 10e-12 },
            Low = Nominal.Low with { Switch = gate, Package = Nominal.Low.Package with { SourceInductance = 1e-13 } },
        };
        var w = Solve(parts, Rated with { BusVoltage = 0 });
        double tau = (4.7 + 3 + gate.SourceResistance) * 4.5e-9;
        // At the pin: the drop over the driver's resistor is missing from 18 V.
        foreach (double t in (double[])[20e-9, 50e-9, 100e-9])
        {
            double drop = 22 * 4.7 / (4.7 + 3 + gate.SourceResistance) * Math.Exp(-t / tau);
            Approximately.Equal(18 - drop, w[Signal.VgsLow][w.Index(t)], 0.003);
        }
    }

    [Fact]
    public void Current_in_a_saturated_channel_is_that_of_its_square_law()
    {
        // Both places conduct for ever: the high one is a short, the low one limits. i = Kp/2 (vgs - Vto)², vgs the
        // gate voltage less the drop on the source resistance.
        var low = Nominal.Low.Switch with { Transconductance = 2 };
        var parts = Nominal with { Low = Nominal.Low with { Switch = low }, High = Nominal.High.Shorted() };
        var w = Solve(parts, Rated with { GateOn = 10, FirstPulse = 2e-6 });
        double i = w[Signal.IdLow][w.Index(1.5e-6)];
        double w0 = 10 - 0.0015 * i - 3.4;

        Approximately.Equal(0.5 * 2 * w0 * w0, i, 0.001);
    }

    [Fact]
    public void Load_inductance_rings_with_the_output_capacitance_once_its_current_has_died()
    {
        // A constant capacitance of 1 nF in each place, no diode: after a tiny pulse the load rings with both in
        // parallel, through the open low place. f = 1/(2 pi sqrt(L C)), C = 2 nF + winding 25 pF + gate-drain 2 x 18
        // pF.
        var s = Nominal.Low.Switch with
        {
            JunctionCapacitance = 0,
            FixedCapacitance = 1e-9,
            GateDrainMinimum = 0.1e-12,
            GateDrainMaximum = 0.1001e-12,
        };
        var place = new PlaceParts(s, DiodeParts.None, Nominal.High.Package);
        var parts = Nominal with
        {
            Bench = Nominal.Bench with { LoadInductance = 20e-6, LoadResistance = 1e-3, WindingResistance = 1 },
            Low = place with { Package = Nominal.Low.Package },
            High = place,
        };
        var w = Waveforms.Of(HalfBridge.Simulate(parts,
            new PulseTrain(0.05e-6, 30e-6, 0.05e-6, 18, -4, 10), 0, 10e-9, 3000));
        var maxima = w.Maxima(Signal.VdsHigh, 10e-6, 0.1, 8);
        double period = (maxima[^1].At - maxima[0].At) / (maxima.Count - 1);

        Approximately.Equal(2 * Math.PI * Math.Sqrt(20e-6 * (2e-9 + 25e-12 + 0.2e-12)), period, 0.005);
    }

    [Fact]
    public void Charge_put_into_the_output_capacitance_is_its_integral()
    {
        // During the first rise of the high place no diode conducts: the integral of its current is its stored charge,
        // Q = Cj Vj/(1-M) ((1 + v/Vj)^(1-M) - 1) + (Cl + about Cgd min) v.
        var w = Solve(Nominal, Rated);
        double to = 4e-6;
        double v = w[Signal.VdsHigh][w.Index(to)];
        var s = Nominal.High.Switch;
        double junction = s.JunctionCapacitance * s.JunctionVoltage / (1 - s.JunctionGrading)
            * (Math.Pow(1 + v / s.JunctionVoltage, 1 - s.JunctionGrading) - 1);
        double swing = (s.GateDrainMaximum - s.GateDrainMinimum) / (1 + Math.PI / 2);
        double middle = s.GateDrainMaximum - swing;
        // Gate-drain part: integral of middle + swing atan(A x) over vgd from -4 V to -4 - v.
        double Primitive(double x) => middle * x + swing * (x * Math.Atan(s.GateDrainSteepness * x)
            - Math.Log(1 + Math.Pow(s.GateDrainSteepness * x, 2)) / (2 * s.GateDrainSteepness));
        double gateDrain = Primitive(-4) - Primitive(-4 - v);

        Approximately.Equal(junction + s.FixedCapacitance * v + gateDrain,
            w.Integral(i => w[Signal.IdHigh][i], 0, to), 0.003);
    }

    [Fact]
    public void Diode_drop_while_freewheeling_is_the_models_static_one()
    {
        var w = Solve(Nominal, Rated);
        double i = -w.Mean(Signal.IdHigh, 13.8e-6, 14e-6);
        var d = Nominal.High.Diode;
        // Static: iD = iE - qM/TM and qM/TM = iE/(1 + TM/tau).
        double injected = i * (1 + d.Lifetime / d.TransitTime);
        double drop = d.EmissionVoltage * Math.Log(injected / d.InjectionCurrent) + d.SeriesResistance * i + 0.002 * i;

        Approximately.Equal(-drop, w.Mean(Signal.VdsHigh, 13.8e-6, 14e-6), 0.002);
    }

    [Fact]
    public void Nothing_moves_before_the_train()
    {
        var t = HalfBridge.Simulate(Nominal, Rated, -1e-6, 1e-9, 1000);

        Assert.All(t[Signal.VdsLow], v => Assert.Equal(600, v, 1e-3));
        Assert.All(t[Signal.IdLow], i => Assert.Equal(6e-6, i, 1e-7));
        Assert.All(t[Signal.VgsLow], v => Assert.Equal(-4, v, 1e-5));
    }

    private static Waveforms Solve(CircuitParameters parts, PulseTrain train) =>
        Waveforms.Of(HalfBridge.Simulate(parts, train, -0.1e-6, 0.2e-9, 100_000));
}
