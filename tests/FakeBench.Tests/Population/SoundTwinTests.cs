using FakeBench.Fixtures;
using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Tests.Instruments;
using FakeBench.Tests.Physics;

namespace FakeBench.Tests.Population;

/// <summary>Each defect moves a quantity across the limit that it has to be caught by, and the same serial without its
/// defect does not; the limits are those of the shipped sequence.</summary>
public sealed class SoundTwinTests
{
    private static readonly PulseTrain Rated = new(8.08e-6, 6e-6, 3e-6, 18, -4, 600);
    private static readonly string[] Channels = ["vgs_low", "vds_low", "id_low", "vgs_high", "vds_high", "vbus"];

    [Theory]
    [InlineData("W1200-9001", 785e-9)]
    [InlineData("W1200-9007", 785e-9)]
    public void Too_much_charge_is_recovered(string serial, double limit) =>
        Above(serial, limit, Charge);

    [Theory]
    [InlineData("W1200-9001", 89)]
    [InlineData("W1200-9003", 89)]
    public void The_current_peaks_too_high(string serial, double limit) =>
        Above(serial, limit, w => w.Max(Signal.IdLow, Rated.On2, Rated.Off2));

    [Fact]
    public void The_ring_of_a_lightly_damped_one_lasts() => Above("W1200-9004", -0.045, w =>
    {
        var maxima = w.Maxima(Signal.VdsHigh, Rated.On2 + 60e-9, 600, 7);
        double bus = w.Mean(Signal.VdsHigh, Rated.On2 + 1.3e-6, Rated.On2 + 1.5e-6);
        return -Math.Log((maxima[0].Value - bus) / (maxima[^1].Value - bus)) / (maxima.Count - 1) / (2 * Math.PI);
    });

    [Fact]
    public void A_high_on_resistance_shows_in_the_on_state_and_is_no_desaturation()
    {
        double OnState(Waveforms w) => w.Mean(Signal.VdsLow, 0.9 * Rated.Off1, Rated.Off1);

        Above("W1200-9006", 1.9, OnState);
        CircuitParameters circuit = new Socket(Setup("W1200-9006")).On(new BenchParts(), 23, 600);
        Assert.True(circuit.Low.Switch.DrainResistance >= 0.4);

        // A switch counts as desaturated above 5 % of the bus: at 600 V, and at 48 V and a tenth of the current too.
        Assert.True(OnState(Fire(Setup("W1200-9006"))) < 0.05 * 600);
        var proving = Rated with { FirstPulse = 5e-6, BusVoltage = 48 };
        Waveforms low = Waveforms.Of(HalfBridge.Simulate(circuit, proving, -0.5e-6, 1e-9, 20_000));
        Assert.True(low.Mean(Signal.VdsLow, 4.5e-6, 5e-6) < 0.05 * 48);
    }

    [Fact]
    public void A_slow_gate_costs_turn_off_energy() => Above("W1200-9008", 158e-6, w =>
    {
        double bus = w.Mean(Signal.Vbus, Rated.On2 - 200e-9, Rated.On2);
        return w.EnergyLow(
            w.Crossing(Signal.VdsLow, 0.1 * bus, Rated.Off1, rising: true),
            w.Crossing(Signal.IdLow, 4, Rated.Off1, rising: false));
    });

    [Fact]
    public void A_leak_is_beyond_what_the_sequence_allows() =>
        Above("W1200-9005", 2e-3, w => w.Mean(Signal.IdLow, -0.4e-6, -0.1e-6));

    [Fact]
    public void A_saturating_inductor_bends_its_ramp()
    {
        // The separate prototype: +27 % at 6.5 mWb.
        Above("W1200-9015", 0.2, w =>
            (Slope(w, 0.75, 0.95) / Slope(w, 0.3, 0.52)) - 1);

        double Slope(Waveforms w, double from, double to) =>
            (w.Mean(Signal.IdLow, (to - 0.01) * Rated.Off1, to * Rated.Off1)
                - w.Mean(Signal.IdLow, from * Rated.Off1, (from + 0.01) * Rated.Off1)) / (to - from);
    }

    [Fact]
    public void A_smaller_die_drops_more_and_rings_faster()
    {
        Above("W1200-9018", 1.9, w => w.Mean(Signal.VdsLow, 0.9 * Rated.Off1, Rated.Off1));
        Above("W1200-9018", 44.4e6, w =>
        {
            var maxima = w.Maxima(Signal.VdsHigh, Rated.On2 + 60e-9, 600, 5);
            return (maxima.Count - 1) / (maxima[^1].At - maxima[0].At);
        });
    }

    [Fact]
    public void A_borderline_one_lies_between_sound_and_limit()
    {
        double Peak(string serial) => Fire(Setup(serial)).Max(Signal.IdHigh, Rated.On2, Rated.Off2);

        Assert.InRange(Peak("W1200-9002"), Peak("W1200-9020") * 1.1, 47);
    }

    [Fact]
    public void A_probe_left_at_1x_records_a_tenth_of_the_current()
    {
        double[] left = Record("W1200-9016", 3, 600);
        double[] sound = Record("W1200-9016", 3, 600, isSound: true);

        Assert.Equal(0.1, Swing(left) / Swing(sound), 0.01);
        Assert.Equal(Record("W1200-9016", 2, 600, isSound: true), Record("W1200-9016", 2, 600));
    }

    [Theory]
    [InlineData(48, 0.3)]
    [InlineData(600, 30)]
    public void Noise_comes_with_the_voltage_and_goes_with_the_defect(double volts, double expected)
    {
        Assert.Equal(expected, Deviation(Record("W1200-9017", 5, volts)[..450]), 0.15 * expected);
        Assert.Equal(0.3, Deviation(Record("W1200-9017", 5, volts, isSound: true)[..450]), 0.2);
    }

    [Fact]
    public void Every_change_is_a_factor_and_changes_something() => Assert.All(DevicePopulation.Named, device =>
    {
        BenchSetup setup = Setup(device.Serial);
        Socket changed = new(setup);
        Socket sound = new(setup with { Sound = true });
        Assert.Matches(@"^([a-z_.]+-?[a-z-]* x[0-9.]+( from 100 V on| 30 ns after .*)? ?)*$", device.Change);
        bool isProbe = device.Changes.Any(c => c.Parameter.StartsWith("probe.", StringComparison.Ordinal));
        bool isSame = changed.On(new BenchParts(), 23, 600) == sound.On(new BenchParts(), 23, 600);
        Assert.Equal(device.Defect is null || isProbe || device.Dies is { Train: > 1 }, isSame);
    });

    [Fact]
    public void There_are_at_least_16_and_healthy_ones_among_them()
    {
        Assert.True(DevicePopulation.Named.Count(d => d.Defect is not null) >= 16);
        Assert.True(DevicePopulation.Named.Count(d => d.Defect is null) >= 2);
    }

    private static BenchSetup Setup(string serial) => new(new BenchValues(5), serial);

    private static void Above(string serial, double limit, Func<Waveforms, double> quantity)
    {
        double defective = quantity(Fire(Setup(serial)));
        double sound = quantity(Fire(Setup(serial) with { Sound = true }));
        Assert.True(defective > limit, $"{serial} has {defective}, limit {limit}");
        Assert.True(sound < limit, $"{serial} without its defect has {sound}, limit {limit}");
    }

    private static Waveforms Fire(BenchSetup setup) => Waveforms.Of(
        HalfBridge.Simulate(new Socket(setup).On(new BenchParts(), 23, 600), Rated, -0.5e-6, 0.5e-9, 42_000));

    // From the zero of the recovery current to where the chord through 90 % and 25 % of its fall meets zero.
    private static double Charge(Waveforms w)
    {
        double zero = w.Crossing(Signal.IdHigh, 0, Rated.On2, rising: true);
        double peak = w.Max(Signal.IdHigh, Rated.On2, Rated.Off2);
        double top = w.Crossing(Signal.IdHigh, 0.9999 * peak, zero, rising: true);
        double at90 = w.Crossing(Signal.IdHigh, 0.9 * peak, top, rising: false);
        double at25 = w.Crossing(Signal.IdHigh, 0.25 * peak, top, rising: false);
        return w.Integral(i => w[Signal.IdHigh][i], zero, at25 + ((at25 - at90) * 0.25 / 0.65));
    }

    private static double[] Record(string serial, int input, double volts, bool isSound = false)
    {
        var bench = new TestBench(Setup(serial) with { Sound = isSound }, Channels);
        bench.Charge(volts);
        bench.Configure();
        TestBench.Say(bench.Scope, "SENS:VOLT5:RANG:UPP 1600;OFFS 400;:SENS:SWE:TINT 2 NS;POIN 9000");
        bench.Fire();
        return bench.Values(input);
    }

    private static double Swing(double[] values) => values[..4000].Max() - values[..4000].Min();

    private static double Deviation(double[] values)
    {
        double mean = values.Average();
        return Math.Sqrt(values.Sum(v => (v - mean) * (v - mean)) / values.Length);
    }
}
