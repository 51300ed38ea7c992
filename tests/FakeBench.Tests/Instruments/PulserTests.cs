namespace FakeBench.Tests.Instruments;

public sealed class PulserTests
{
    [Fact]
    public void It_fires_once_for_each_arming()
    {
        var bench = new TestBench();
        bench.Configure();
        TestBench.Say(bench.Pulser, "INIT");
        Assert.Equal("32", TestBench.Ask(bench.Pulser, "STAT:OPER:COND?"));
        TestBench.Refused(bench.Pulser, "INIT", -213);
        TestBench.Say(bench.Pulser, "TRIG");
        Assert.Equal("0;1", TestBench.Ask(bench.Pulser, "STAT:OPER:COND?;:SOUR:PULS:COUN?"));
        TestBench.Refused(bench.Pulser, "TRIG", -211);
        Assert.Equal("1", TestBench.Ask(bench.Pulser, "PULS:COUN?"));
    }

    [Fact]
    public void It_arms_only_with_its_output_on()
    {
        var bench = new TestBench();
        TestBench.Refused(bench.Pulser, "INIT", -221);
        TestBench.Say(bench.Pulser, "OUTP ON;:INIT:IMM");
    }

    [Theory]
    [InlineData("ABOR")]
    [InlineData("OUTP 0")]
    [InlineData("SOUR:PULS1:WIDT 5E-6")]
    [InlineData("SOUR:VOLT:HIGH 15")]
    [InlineData("*RST")]
    public void It_is_disarmed_by(string command)
    {
        var bench = new TestBench();
        bench.Configure();
        TestBench.Say(bench.Pulser, "INIT");
        TestBench.Say(bench.Pulser, command);
        TestBench.Refused(bench.Pulser, "TRIG", -211);
    }

    [Fact]
    public void It_says_back_what_was_set()
    {
        var bench = new TestBench();
        bench.Configure();
        Assert.Equal(
            "8.08E-06;3.0E-06;6.0E-06;1.8E+01;-4.0E+00;1",
            TestBench.Ask(bench.Pulser, "SOUR:PULS:WIDT?;:SOUR:PULS2:WIDT?;DEL?;:SOUR:VOLT:HIGH?;LOW?;:OUTP?"));
        TestBench.Refused(bench.Pulser, "SOUR:PULS1:DEL 1E-6", -114);
        TestBench.Refused(bench.Pulser, "SOUR:PULS1:WIDT 1 MS", -222);
    }

    // The load's current alone: 600 V (8.08 + 3) us / 120 uH = 55 A at off2, so 1/2 40 A 8.08 us + (40 A + 55 A)/2 3 us
    // = 304 uC, 6.1 V of 50 uF; resistances and the droop itself take up to 5 % of it.
    [Fact]
    public void A_train_takes_its_charge_from_the_bank()
    {
        var bench = new TestBench();
        bench.Charge(600);
        bench.Configure();
        TestBench.Say(bench.Supply, "OUTP 0");
        double before = bench.Volts;
        TestBench.Say(bench.Pulser, "INIT;:TRIG");
        Assert.InRange(before - bench.Volts, 6.1 * 0.95, 6.1 * 1.02);
        TestBench.Say(bench.Supply, "OUTP 1");
        bench.Wait(0.25);
        Assert.Equal(600, bench.Volts, 0.2);
    }
}
