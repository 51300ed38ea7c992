using FakeBench.Faults;
using FakeBench.Tests.Instruments;

namespace FakeBench.Tests.Faults;

public sealed class FaultTests
{
    [Theory]
    [InlineData("interlock-opens@volts:300", "0,0,1,0")]
    [InlineData("emergency-stop@volts:300", "1,1,1,0")]
    public void The_chain_opens_at_a_voltage(string fault, string state)
    {
        var bench = new TestBench(faults: fault);
        bench.Charge(299);
        Assert.Equal("1", TestBench.Ask(bench.Supply, "OUTP?"));
        TestBench.Say(bench.Supply, "VOLT 600");
        bench.Wait(0.02);
        Assert.Equal("0", TestBench.Ask(bench.Supply, "OUTP?"));
        Assert.Equal(state, TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        Assert.InRange(bench.Volts, 250, 300.1);
    }

    [Fact]
    public void The_chain_opens_at_a_train()
    {
        TestBench bench = Ready("interlock-opens@fire:2");
        bench.Fire();
        Assert.Equal("1,0,0,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        bench.Fire();
        Assert.Equal("0,0,1,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
    }

    [Fact]
    public void The_chain_opens_at_a_time()
    {
        var bench = new TestBench(faults: "interlock-opens@seconds:2.5");
        bench.Charge(100);
        bench.Wait(1.4);
        Assert.Equal("1,0,0,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
        bench.Wait(0.2);
        Assert.Equal("0,0,1,0", TestBench.Ask(bench.Interlock, "SENS:DATA?"));
    }

    [Fact]
    public void The_supply_clips_its_set_point_without_an_error()
    {
        var bench = new TestBench(faults: "supply-clips");
        TestBench.Say(bench.Supply, "VOLT 48");
        Assert.Equal("4.8E+01", TestBench.Ask(bench.Supply, "VOLT?"));
        TestBench.Say(bench.Supply, "VOLT 600");
        Assert.Equal("3.5E+02", TestBench.Ask(bench.Supply, "VOLT?"));
    }

    [Fact]
    public void The_over_voltage_protection_trips()
    {
        var bench = new TestBench(faults: "over-voltage-trips@volts:200");
        bench.Charge(600);
        Assert.Equal("1;0", TestBench.Ask(bench.Supply, "VOLT:PROT:TRIP?;:OUTP?"));
        Assert.InRange(bench.Volts, 190, 200.1);
    }

    [Fact]
    public void The_bus_stays_up_although_the_bleeder_says_that_it_is_engaged()
    {
        var bench = new TestBench(faults: "bus-stays-up");
        bench.Charge(600);
        TestBench.Say(bench.Supply, "OUTP 0");
        TestBench.Say(bench.Interlock, "OUTP 1");
        bench.Wait(5);
        Assert.Equal("1", TestBench.Ask(bench.Interlock, "OUTP?"));
        Assert.InRange(bench.Volts, 580, 600);
    }

    [Fact]
    public void A_stale_record_has_the_bytes_and_the_count_of_the_train_before()
    {
        TestBench bench = Ready("stale-record@fire:2");
        bench.Fire();
        short[] before = bench.Codes(3);
        bench.Fire();
        Assert.Equal(before, bench.Codes(3));
        Assert.Equal("1;0", TestBench.Ask(bench.Scope, "SWE:COUN:ACT?;:STAT:OPER:COND?"));
        bench.Fire();
        Assert.NotEqual(before, bench.Codes(3));
    }

    [Fact]
    public void A_missed_trigger_leaves_the_scope_waiting()
    {
        TestBench bench = Ready("trigger-missed@fire:1");
        bench.Fire();
        Assert.Equal("32;0", TestBench.Ask(bench.Scope, "STAT:OPER:COND?;:SWE:COUN:ACT?"));
        TestBench.Say(bench.Scope, "ABOR");
        bench.Fire();
        Assert.Equal("0;1", TestBench.Ask(bench.Scope, "STAT:OPER:COND?;:SWE:COUN:ACT?"));
    }

    [Fact]
    public void A_clipped_range_sticks_at_the_end_codes_in_one_train()
    {
        TestBench bench = Ready("clipped-range@fire:1");
        bench.Fire();
        Assert.Equal(2047, bench.Codes(2).Max());
        bench.Fire();
        Assert.True(bench.Codes(2).Max() < 2047);
    }

    [Fact]
    public void A_link_drops_in_the_middle_of_a_block()
    {
        TestBench bench = Ready("link-drops@block:2");
        bench.Fire();
        Assert.False(bench.Scope.Obey("TRAC? INT1").CutShort);
        Assert.True(bench.Scope.Obey("TRAC? INT1").CutShort);
        Assert.False(bench.Scope.Obey("TRAC? INT1").CutShort);
    }

    [Fact]
    public void A_reply_comes_late_once()
    {
        TestBench bench = Ready("late-reply@fire:1");
        Assert.Equal(TimeSpan.Zero, bench.Scope.Obey("*IDN?").Late);
        TestBench.Say(bench.Pulser, "INIT;:TRIG");
        Assert.Equal(LinkFault.Lateness, bench.Scope.Obey("*IDN?").Late);
        Assert.Equal(TimeSpan.Zero, bench.Scope.Obey("*IDN?").Late);
    }

    [Fact]
    public void A_silent_supply_answers_nothing_and_stays_as_it_is()
    {
        var bench = new TestBench(faults: "silent-supply@volts:50");
        bench.Charge(100);
        Assert.Equal("", TestBench.Ask(bench.Supply, "OUTP?"));
        Assert.Equal(100, bench.Volts, 0.1);
    }

    [Fact]
    public void A_fired_train_is_not_answered()
    {
        TestBench bench = Ready("fire-unanswered@fire:1");
        TestBench.Say(bench.Scope, "INIT");
        TestBench.Say(bench.Pulser, "INIT");
        bench.Pulser.Obey("TRIG");
        bench.Wait(1e-3);
        Assert.Equal("", TestBench.Ask(bench.Pulser, "PULS:COUN?"));
        Assert.Equal("1", TestBench.Ask(bench.Scope, "SWE:COUN:ACT?"));
    }

    [Fact]
    public void An_open_voltmeter_reads_nothing_on_a_full_bank()
    {
        var bench = new TestBench(faults: "voltmeter-open");
        bench.Charge(600);
        Assert.Equal(0, bench.Volts);
        Assert.Equal(600, bench.Bench.BankVoltage, 0.1);
    }

    [Fact]
    public void The_error_queue_is_full_and_ends_in_overflow()
    {
        var bench = new TestBench(faults: "error-queue-full");
        string[] errors = [.. Enumerable.Range(0, 17).Select(_ => TestBench.Ask(bench.Supply, "SYST:ERR?"))];
        Assert.StartsWith("-222,", errors[0], StringComparison.Ordinal);
        Assert.Equal("-350,\"Queue overflow\"", errors[15]);
        Assert.Equal("0,\"No error\"", errors[16]);
    }

    [Fact]
    public void The_supply_says_that_it_is_a_voltmeter()
    {
        Assert.Equal("BENCHRUNNER,FAKEBENCH-SUPPLY,0,1", TestBench.Ask(new TestBench().Supply, "*IDN?"));
        Assert.Equal(
            "BENCHRUNNER,FAKEBENCH-VOLTMETER,0,1",
            TestBench.Ask(new TestBench(faults: "wrong-identity").Supply, "*IDN?"));
    }

    [Fact]
    public void Every_fault_of_the_catalogue_is_read_and_begins_as_it_says() =>
        Assert.All(FaultCatalogue.All, kind => Assert.Equal(kind.Begins, Fault.Parse(kind.Name).Begins));

    [Theory]
    [InlineData("no-such-fault")]
    [InlineData("late-reply@")]
    [InlineData("late-reply@fire")]
    [InlineData("late-reply@fire:0")]
    [InlineData("late-reply@fire:1.5")]
    [InlineData("late-reply@moon:1")]
    [InlineData("late-reply@volts:-3")]
    public void A_fault_that_is_none_is_refused(string text) => Assert.Throws<FormatException>(() => Fault.Parse(text));

    private static TestBench Ready(string fault)
    {
        var bench = new TestBench(faults: fault);
        bench.Charge(600);
        bench.Configure();
        return bench;
    }
}
