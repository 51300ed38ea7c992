using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Tests.Physics;

namespace FakeBench.Tests.Population;

public sealed class DevicePopulationTests
{
    [Fact]
    public void One_serial_and_seed_is_always_the_same_device_and_another_seed_another() =>
        Assert.Multiple(
            () => Assert.Equal(DevicePopulation.Draw("W1200-0001", 1), DevicePopulation.Draw("W1200-0001", 1)),
            () => Assert.NotEqual(DevicePopulation.Draw("W1200-0001", 1), DevicePopulation.Draw("W1200-0001", 2)),
            () => Assert.NotEqual(
                DevicePopulation.Draw("W1200-0001", 1).Low, DevicePopulation.Draw("W1200-0002", 1).Low));

    [Fact]
    public void Named_devices_have_distinct_serials_a_change_for_each_defect_and_an_outcome()
    {
        Assert.Equal(DevicePopulation.Named.Count, DevicePopulation.Named.Select(d => d.Serial).Distinct().Count());
        Assert.All(DevicePopulation.Named, d =>
        {
            Assert.Matches("^W1200-9[0-9]{3}$", d.Serial);
            Assert.Equal(d.Defect is null, d.Change.Length == 0);
            Assert.Equal(d.Defect is null, d.ExpectedOutcome == "accepted");
            Assert.Contains(
                d.ExpectedOutcome, (string[])["accepted", "rejected", "undecided", "not-measured", "stopped"]);
            Assert.Equal(d, DevicePopulation.Draw(d.Serial, 7));
        });
    }

    [Fact]
    public void Any_other_serial_is_sound()
    {
        var device = DevicePopulation.Draw("W1200-0001", 1);

        Assert.Null(device.Defect);
        Assert.Equal("accepted", device.ExpectedOutcome);
        Assert.Equal("WD-1200S-25", device.Part);
    }

    [Fact]
    public void Spread_has_the_stated_deviation_and_stays_within_three_of_it()
    {
        var nominal = CircuitParameters.NominalPlace(high: true);
        var devices = Enumerable.Range(0, 4000).Select(i => DevicePopulation.Draw($"W1200-{i}", 3)).ToList();

        // Between-place parts add 0.3 of the deviation: sqrt(1 + 0.09) of it.
        Spread(devices.Select(d => d.High.Switch.Threshold - nominal.Switch.Threshold), 0.12 * 1.044, 0.12 * 3.9);
        Spread(devices.Select(d => d.High.Diode.Lifetime / nominal.Diode.Lifetime - 1), 0.06 * 1.044, 0.06 * 3.9);
        Spread(devices.Select(d => d.High.Switch.GateResistance / nominal.Switch.GateResistance - 1), 0.06, 0.18);
        Spread(devices.Select(d => d.High.Package.EddyResistance / nominal.Package.EddyResistance - 1), 0.08, 0.24);
        Spread(devices.Select(d => d.Low.Switch.Threshold - d.High.Switch.Threshold), 0.12 * 0.3 * Math.Sqrt(2), 0.22);
    }

    [Fact, Trait("kind", "slow")]
    public void Quantities_of_the_population_spread_as_the_starting_limits_assume()
    {
        // Means and deviations of a population of 1,000 of a separate prototype; 200 of ours.
        var rated = new PulseTrain(8.08e-6, 6e-6, 3e-6, 18, -4, 600);
        var irm = new List<double>();
        var off = new List<double>();
        for (int i = 0; i < 200; i++)
        {
            var parts = DevicePopulation.Draw($"W1200-{i:d4}", 1).On(new BenchParts());
            var w = Waveforms.Of(HalfBridge.Simulate(parts, rated, 0, 0.5e-9, 40_000));
            irm.Add(w.Max(Signal.IdHigh, rated.On2, rated.Off2));
            off.Add(w.Max(Signal.VdsLow, rated.Off1, rated.On2));
        }

        Approximately.Equal(40.9, irm.Average(), 0.01);
        Approximately.Equal(724, off.Average(), 0.003);
        Assert.InRange(Deviation(irm), 1.2, 1.8);
        Assert.InRange(Deviation(off), 2.2, 3.4);
    }

    private static void Spread(IEnumerable<double> values, double deviation, double most)
    {
        var all = values.ToList();
        Assert.InRange(all.Average(), -0.07 * deviation, 0.07 * deviation);
        // Cut at three deviations a normal loses 1.3 % of its own.
        Approximately.Equal(0.987 * deviation, Deviation(all), 0.05);
        Assert.All(all, v => Assert.InRange(v, -most * 1.0001, most * 1.0001));
    }

    private static double Deviation(List<double> values)
    {
        double mean = values.Average();
        return Math.Sqrt(values.Sum(v => (v - mean) * (v - mean)) / (values.Count - 1));
    }
}
