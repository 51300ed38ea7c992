using System.Globalization;
using FakeBench.Instruments;

namespace FakeBench.Tests.Instruments;

public sealed class SupplyTests
{
    [Fact]
    public void It_charges_the_bank_at_its_slew_rate_and_says_that_it_settles()
    {
        var bench = new TestBench();
        TestBench.Say(bench.Interlock, "OUTP OFF");
        TestBench.Say(bench.Supply, "SOURce:VOLTage:LEVel:IMMediate:AMPLitude 600 V;:OUTPut:STATe ON");
        bench.Wait(0.04);
        Assert.Equal("2", TestBench.Ask(bench.Supply, "STAT:OPER:COND?"));
        Assert.InRange(bench.Volts, 7500 * 0.037, 7500 * 0.04); // 7500 V/s, behind it by the time constant of 0.2 ms
        bench.Wait(0.1);
        Assert.Equal("0", TestBench.Ask(bench.Supply, "STAT:OPER:COND?"));
        Assert.Equal(600, bench.Volts, 0.2);
    }

    [Fact]
    public void Its_own_reading_is_a_little_wrong_and_says_nothing_about_the_bank_when_it_is_off()
    {
        var bench = new TestBench();
        bench.Charge(600);
        double own = TestBench.Number(bench.Supply, "MEAS:VOLT?");
        Assert.InRange(Math.Abs(own - bench.Volts), 0.1, 3);
        TestBench.Say(bench.Supply, "OUTP 0");
        Assert.InRange(TestBench.Number(bench.Supply, "MEAS:VOLT?"), 0, 1);
        Assert.Equal(600, bench.Volts, 1.0);
    }

    [Theory]
    [InlineData(1e-3)]
    [InlineData(0.1)]
    [InlineData(2.5)]
    public void Its_reading_of_the_current_is_as_good_as_it_states(double limit)
    {
        var bench = new TestBench("W1200-9009"); // a short: the current is the limit
        TestBench.Say(bench.Interlock, "OUTP 0");
        TestBench.Say(bench.Supply, string.Create(CultureInfo.InvariantCulture, $"CURR {limit};VOLT 600;:OUTP 1"));
        bench.Wait(2);
        Assert.Equal("2", TestBench.Ask(bench.Supply, "STAT:QUES:COND?"));
        double error = TestBench.Number(bench.Supply, "MEAS:CURR?") - limit;
        Assert.InRange(Math.Abs(error), 1e-6, Supply.CurrentAccuracy);
    }

    [Fact]
    public void It_limits_its_current_and_says_so()
    {
        var bench = new TestBench();
        TestBench.Say(bench.Interlock, "OUTP 0");
        TestBench.Say(bench.Supply, "CURR 0.1;VOLT 600;:OUTP 1");
        bench.Wait(0.1);
        Assert.Equal("2", TestBench.Ask(bench.Supply, "STAT:QUES:COND?"));
        Assert.Equal(0.1, TestBench.Number(bench.Supply, "MEAS:CURR?"), 1e-3);
        Assert.InRange(bench.Volts, 195, 201); // I t / C = 0.1 A 0.1 s / 50 uF = 200 V
    }

    [Fact]
    public void Its_protection_latches_until_it_is_cleared()
    {
        var bench = new TestBench();
        TestBench.Say(bench.Supply, "VOLT:PROT 300");
        bench.Charge(600);
        Assert.Equal("1;0;1", TestBench.Ask(bench.Supply, "VOLT:PROT:TRIP?;:OUTP?;:STAT:QUES:COND?"));
        Assert.InRange(bench.Volts, 290, 300.1);
        TestBench.Refused(bench.Supply, "OUTP 1", -221);
        TestBench.Say(bench.Supply, "VOLT:PROT:CLE;:VOLT:PROT 700;:OUTP 1");
        bench.Wait(1);
        Assert.Equal(600, bench.Volts, 0.2);
    }

    [Fact]
    public void It_cannot_pull_the_bank_down()
    {
        var bench = new TestBench();
        bench.Charge(600);
        TestBench.Say(bench.Supply, "VOLT 48");
        bench.Wait(1);
        Assert.InRange(bench.Volts, 590, 600);
        TestBench.Say(bench.Interlock, "OUTP 1");
        bench.Wait(0.64);
        Assert.InRange(bench.Volts, 45, 48.1); // 5 kOhm, 50 uF: 600 V to 48 V in 0.631 s, then the supply holds it
        bench.Wait(3);
        Assert.Equal(48, bench.Volts, 0.1);
    }

    [Fact]
    public void Its_settings_have_bounds()
    {
        var bench = new TestBench();
        TestBench.Refused(bench.Supply, "VOLT 1001", -222);
        TestBench.Refused(bench.Supply, "CURR 2.6", -222);
        Assert.Equal("0.0E+00;2.5E+00", TestBench.Ask(bench.Supply, "VOLT?;CURR? MAX"));
    }

    [Fact]
    public void Reset_switches_it_off()
    {
        var bench = new TestBench();
        bench.Charge(100);
        TestBench.Say(bench.Supply, "*RST");
        Assert.Equal("0;0.0E+00", TestBench.Ask(bench.Supply, "OUTP?;VOLT?"));
    }

    // A part with 20 uS from drain to source: 12 mA at 600 V beside the 0.1 mA of the empty socket.
    [Fact]
    public void A_leaking_device_draws_its_current()
    {
        var sound = new TestBench();
        sound.Charge(600);
        Assert.Equal(0.1e-3, TestBench.Number(sound.Supply, "MEAS:CURR?"), 0.1e-3);
        var leaking = new TestBench(NamedDevice("leaky"));
        leaking.Charge(600);
        Assert.Equal(12.1e-3, TestBench.Number(leaking.Supply, "MEAS:CURR?"), 0.2e-3);
    }

    [Fact]
    public void A_shorted_device_keeps_the_bus_down_and_the_supply_in_its_limit()
    {
        var bench = new TestBench(NamedDevice("shorted-low"));
        bench.Charge(48);
        Assert.InRange(bench.Volts, 0, 1);
        Assert.Equal("2", TestBench.Ask(bench.Supply, "STAT:QUES:COND?"));
    }

    private static string NamedDevice(string defect) =>
        FakeBench.Population.DevicePopulation.Named.Single(d => d.Defect == defect).Serial;
}
