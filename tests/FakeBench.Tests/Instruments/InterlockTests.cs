namespace FakeBench.Tests.Instruments;

public sealed class InterlockTests
{
    [Fact]
    public void It_starts_with_a_closed_loop_and_the_bleeder_engaged() =>
        Assert.Equal("1,0,1,0", TestBench.Ask(new TestBench().Interlock, "SENSe:DATA?"));

    [Fact]
    public void Opening_the_enclosure_bleeds_the_bank_and_switches_the_supply_off()
    {
        var bench = new TestBench();
        bench.Charge(600);
        bench.Configure();
        TestBench.Say(bench.Pulser, "INIT");
        Assert.Null(bench.Bench.Do("open"));
        Assert.Equal("0,0,1,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        Assert.Equal("0", TestBench.Ask(bench.Supply, "OUTP?"));
        Assert.Equal("0", TestBench.Ask(bench.Pulser, "STAT:OPER:COND?"));
        bench.Wait(1);
        Assert.InRange(bench.Volts, 0, 15); // 600 V e^(-1 s / 0.25 s) = 11 V
        TestBench.Refused(bench.Interlock, "OUTP 0", -221);
        TestBench.Refused(bench.Supply, "OUTP 1", -221);
        TestBench.Refused(bench.Pulser, "INIT", -221);
    }

    [Fact]
    public void Closing_the_enclosure_energises_nothing()
    {
        var bench = new TestBench();
        bench.Charge(600);
        bench.Bench.Do("open");
        bench.Bench.Do("close");
        bench.Wait(10);
        Assert.Equal("1,0,1,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        Assert.Equal("0", TestBench.Ask(bench.Supply, "OUTP?"));
        Assert.Equal(0, bench.Volts);
    }

    [Fact]
    public void The_emergency_stop_acts_until_it_is_released()
    {
        var bench = new TestBench();
        bench.Charge(100);
        bench.Bench.Do("stop");
        Assert.Equal("1,1,1,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        TestBench.Refused(bench.Supply, "OUTP 1", -221);
        bench.Bench.Do("release");
        TestBench.Say(bench.Supply, "OUTP 1");
    }

    [Fact]
    public void A_watchdog_that_is_fed_does_nothing()
    {
        var bench = new TestBench();
        bench.Charge(600);
        TestBench.Say(bench.Interlock, "SYST:WATC:TIMe 0.5");
        for (int i = 0; i < 20; i++)
        {
            bench.Wait(0.4);
            Assert.Equal("1,0,0,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        }

        Assert.Equal("1", TestBench.Ask(bench.Supply, "OUTP?"));
    }

    [Fact]
    public void A_watchdog_that_hears_nothing_opens_supply_and_bleeds_at_its_time()
    {
        var bench = new TestBench();
        bench.Charge(600);
        TestBench.Say(bench.Interlock, "SYST:WATC:TIME 500 MS");
        bench.Wait(1);
        // 0.5 s of bleeding 50 uF through 5 kOhm, 6 MOhm and 10 nS of the device: 81.06 V, times the voltmeter's gain.
        double drain = ((1 / 5e3) + (1 / 6e6) + 10e-9) / 50e-6;
        Assert.Equal(600 * Math.Exp(-0.5 * drain) * 1.0002, bench.Volts, 0.002);
        Assert.Equal("0", TestBench.Ask(bench.Supply, "OUTP?"));
        Assert.Equal("1,0,1,1", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        TestBench.Refused(bench.Supply, "OUTP 1", -221);
        TestBench.Say(bench.Interlock, "SYST:WATC:TIME 0");
        TestBench.Say(bench.Supply, "OUTP 1");
    }

    [Theory]
    [InlineData("insert W1200-0002")] // the enclosure is closed
    [InlineData("push")]
    [InlineData("insert")]
    public void Hands_that_cannot_do_it_say_why(string hand) => Assert.NotNull(new TestBench().Bench.Do(hand));

    [Fact]
    public void Hands_exchange_the_device_through_the_open_enclosure()
    {
        var bench = new TestBench();
        Assert.Null(bench.Bench.Do("open"));
        Assert.Null(bench.Bench.Do("insert W1200-0002"));
        Assert.Null(bench.Bench.Do("close"));
        Assert.Equal("W1200-0002", bench.Bench.Serial);
    }
}
