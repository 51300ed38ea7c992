using FakeBench.Fixtures;

namespace FakeBench.Tests.Instruments;

public sealed class HotplateTests
{
    [Fact]
    public void It_heats_comes_to_its_set_point_and_says_so()
    {
        TestBench bench = TestBench.Hot();
        Assert.Equal(23.1, TestBench.Number(bench.Hotplate, "MEASure:TEMPerature?"), 0.01);
        TestBench.Say(bench.Hotplate, "SOURce:TEMPerature:SPOint 125");
        Assert.Equal("1.25E+02;0", TestBench.Ask(bench.Hotplate, "SOURce:TEMPerature:SPOint?;:OUTPut:STATe?"));
        TestBench.Say(bench.Hotplate, "OUTPut:STATe 1");
        bench.Wait(10);
        Assert.Equal("2", TestBench.Ask(bench.Hotplate, "STAT:OPER:COND?"));

        // Full power into 160 J/K with a loss of 1 W/K: 400 K (1 - e^(-t/160 s)) above the room.
        Assert.Equal(23.1 + (400 * (1 - Math.Exp(-10 / 160.0))), TestBench.Number(bench.Hotplate, "MEAS:TEMP?"), 0.02);
        bench.Wait(120);
        Assert.Equal("0", TestBench.Ask(bench.Hotplate, "STAT:OPER:COND?"));
        Assert.Equal(125.1, TestBench.Number(bench.Hotplate, "MEAS:TEMP?"), 0.011);
    }

    [Fact]
    public void Switched_off_it_cools_towards_the_room()
    {
        TestBench bench = TestBench.Hot();
        TestBench.Say(bench.Hotplate, "TEMP:SPO 100;:OUTP 1");
        bench.Wait(300);
        TestBench.Say(bench.Hotplate, "OUTP 0");
        bench.Wait(160); // one time constant: 160 J/K over 1 W/K

        Assert.Equal(23.1 + (77 / Math.E), TestBench.Number(bench.Hotplate, "MEAS:TEMP?"), 0.02);
    }

    [Fact]
    public void A_set_point_beyond_the_plate_is_refused_and_reset_switches_it_off()
    {
        TestBench bench = TestBench.Hot();
        TestBench.Refused(bench.Hotplate, "TEMP:SPO 201", -222);
        TestBench.Say(bench.Hotplate, "TEMP:SPO 80 CEL;:OUTP 1;*RST");
        Assert.Equal("2.5E+01;0", TestBench.Ask(bench.Hotplate, "TEMP:SPO?;:OUTP?"));
    }

    [Fact]
    public void A_bench_has_one_only_if_it_is_asked_for()
    {
        Assert.Null(new TestBench().Panels.Hotplate);
        Assert.Equal(
            ["supply", "pulser", "scope", "voltmeter", "interlock", "hotplate"],
            TestBench.Hot().Panels.All.Select(i => i.Role));
    }

    [Fact]
    public void A_hot_device_drops_more_and_recovers_more_and_a_settled_plate_gives_one_circuit()
    {
        TestBench bench = TestBench.Hot();
        var cold = bench.Bench.HalfBridge;
        Assert.Equal(new TestBench().Bench.HalfBridge, cold); // 23 degC counts as nominal
        TestBench.Say(bench.Hotplate, "TEMP:SPO 125;:OUTP 1");
        bench.Wait(60);
        TestBench.Say(bench.Hotplate, "*CLS");
        var hot = bench.Bench.HalfBridge;
        bench.Wait(60);
        TestBench.Say(bench.Hotplate, "*CLS");

        // 100 K above 25 degC: +50 %, -0.5 V, +50 %, as stated.
        Assert.Equal(1.5, hot.Low.Switch.DrainResistance / cold.Low.Switch.DrainResistance, 1e-9);
        Assert.Equal(-0.5, hot.Low.Switch.Threshold - cold.Low.Switch.Threshold, 1e-9);
        Assert.Equal(1.5, hot.High.Diode.Lifetime / cold.High.Diode.Lifetime, 1e-9);
        Assert.Equal(hot, bench.Bench.HalfBridge);
    }

    [Fact]
    public void Without_a_plate_the_devices_are_as_warm_as_the_room()
    {
        var warm = new TestBench(
            new BenchSetup(new BenchValues(5), "W1200-0001") { Ambient = 45 }, TestBench.Channels);

        Assert.Equal(
            1.1,
            warm.Bench.HalfBridge.High.Diode.Lifetime / new TestBench().Bench.HalfBridge.High.Diode.Lifetime,
            1e-9);
    }

    [Fact]
    public void How_often_it_is_looked_at_changes_nothing()
    {
        var once = new Plate(160, 23) { SetPoint = 125, Output = true };
        var often = new Plate(160, 23) { SetPoint = 125, Output = true };
        once.Advance(55);
        for (int i = 0; i < 5500; i++)
        {
            often.Advance(0.01);
        }

        Assert.Equal(once.Temperature, often.Temperature, 1e-6);
        Assert.InRange(once.Temperature, 120, 125);
    }
}
