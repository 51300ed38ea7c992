using System.Buffers.Binary;
using System.Globalization;
using System.Text;

namespace FakeBench.Tests.Instruments;

public sealed class ScopeTests
{
    [Fact]
    public void A_record_shows_the_train()
    {
        TestBench bench = Fired();
        double[] gate = bench.Values(1);
        double[] drain = bench.Values(2);
        double[] current = bench.Values(3);
        int trigger = 100; // 1 us of pretrigger at 10 ns
        Assert.True(gate[trigger - 3] < 7 && gate[trigger + 3] > 7);
        Assert.Equal(-4, gate[0], 0.2);
        Assert.Equal(600, drain[0], 3.0);
        Assert.InRange(drain[trigger + 400], 0, 2);
        // The inductor: 600 V 8.08 us / 120 uH = 40.4 A at off1.
        Assert.Equal(40.4, current[trigger + 800], 1.0);
    }

    [Fact]
    public void The_preamble_scales_what_the_block_holds()
    {
        TestBench bench = Fired();
        Assert.Equal(
            [2000, 1e-8, -1e-6, 0, 1000 / 4096.0, 400, 0, -2048, 2047, 1], bench.Preamble(2));
        Assert.Equal(2000, bench.Codes(2).Length);
    }

    [Fact]
    public void Both_byte_orders_both_widths_and_text_say_the_same()
    {
        TestBench bench = Fired();
        short[] swapped = bench.Codes(2);
        TestBench.Say(bench.Scope, "FORM:BORD NORM");
        Assert.Equal(swapped, bench.Codes(2).Select(BinaryPrimitives.ReverseEndianness));
        TestBench.Say(bench.Scope, "FORM ASC");
        string[] text = TestBench.Ask(bench.Scope, "TRAC? INT2").Split(',');
        Assert.Equal(swapped, text.Select(t => short.Parse(t, CultureInfo.InvariantCulture)));
        TestBench.Say(bench.Scope, "FORM INT,8");
        Assert.Equal(1000 / 256.0, bench.Preamble(2)[4]);
        byte[] block = bench.Scope.Obey("TRAC? INT2").Bytes;
        Assert.Equal("#42000", Encoding.ASCII.GetString(block, 0, 6));
        Assert.Equal([.. swapped.Select(c => (byte)(sbyte)(c >> 4))], block[6..^1]);
    }

    [Fact]
    public void After_reset_the_format_is_text_and_the_high_byte_comes_first()
    {
        // SCPI-1999 volume 2, 9.2 and 9.4.
        Assert.Equal("ASC,0;NORM", TestBench.Ask(new TestBench().Scope, "FORM?;FORM:BORD?"));
    }

    [Fact]
    public void It_waits_for_its_trigger_and_counts_what_it_saw()
    {
        var bench = new TestBench();
        bench.Configure();
        Assert.Equal("0;0", TestBench.Ask(bench.Scope, "SWE:COUN:ACT?;:STAT:OPER:COND?"));
        TestBench.Say(bench.Scope, "INIT");
        Assert.Equal("32", TestBench.Ask(bench.Scope, "STAT:OPER:COND?"));
        TestBench.Refused(bench.Scope, "INIT", -213);
        bench.Wait(100);
        Assert.Equal("32", TestBench.Ask(bench.Scope, "STAT:OPER:COND?"));
        TestBench.Say(bench.Pulser, "INIT;:TRIG");
        Assert.Equal("8;0", TestBench.Ask(bench.Scope, "STAT:OPER:COND?;:SWE:COUN:ACT?"));
        bench.Wait(1e-3);
        Assert.Equal("0;1", TestBench.Ask(bench.Scope, "STAT:OPER:COND?;:SWE:COUN:ACT?"));
    }

    [Fact]
    public void A_train_that_it_does_not_wait_for_leaves_the_record_as_it_was()
    {
        TestBench bench = Fired();
        short[] before = bench.Codes(3);
        TestBench.Say(bench.Pulser, "SOUR:PULS1:WIDT 4 US;:INIT;TRIG");
        Assert.Equal(before, bench.Codes(3));
        Assert.Equal("1", TestBench.Ask(bench.Scope, "SWE:COUN:ACT?"));
    }

    [Fact]
    public void Without_a_record_there_is_nothing_to_read()
    {
        var bench = new TestBench();
        TestBench.Refused(bench.Scope, "TRAC:DATA? INT1", -230);
        TestBench.Refused(bench.Scope, "TRAC:PRE? INT1", -230);
        TestBench.Refused(bench.Scope, "TRAC:DATA? INT5", -224);
        TestBench.Refused(bench.Scope, "SENS:VOLT5:RANG 10", -114);
    }

    [Fact]
    public void A_level_that_is_never_crossed_never_triggers()
    {
        var bench = new TestBench();
        bench.Configure();
        TestBench.Say(bench.Scope, "TRIG:LEV 30;:INIT");
        TestBench.Say(bench.Pulser, "INIT;:TRIG");
        Assert.Equal("32", TestBench.Ask(bench.Scope, "STAT:OPER:COND?"));
        TestBench.Say(bench.Scope, "ABOR");
        Assert.Equal("0", TestBench.Ask(bench.Scope, "STAT:OPER:COND?"));
    }

    [Fact]
    public void A_late_trigger_moves_the_record()
    {
        var bench = new TestBench();
        bench.Charge(600);
        bench.Configure();
        TestBench.Say(bench.Scope, "TRIG:SOUR INT3;LEV 38"); // above the turn-on's spike: 7.6 us up the first pulse
        bench.Fire();
        double[] current = bench.Values(3);
        Assert.Equal(38, current[100], 0.5);
        Assert.Equal(33, current[0], 0.5); // 1 us earlier at 600 V / 120 uH = 5 A/us
    }

    [Fact]
    public void A_signal_beyond_the_range_sticks_at_the_rails()
    {
        var bench = new TestBench();
        bench.Charge(600);
        bench.Configure();
        TestBench.Say(bench.Scope, "SENS:VOLT2:RANG:UPP 200;OFFS 300");
        bench.Fire();
        Assert.Equal((-2048, 2047), (bench.Codes(2).Min(), bench.Codes(2).Max()));
    }

    [Fact]
    public void One_seed_gives_one_trace_and_another_train_another()
    {
        TestBench first = Fired();
        TestBench second = Fired();
        short[] codes = first.Codes(3);
        Assert.Equal(codes, second.Codes(3));
        second.Fire();
        Assert.NotEqual(codes, second.Codes(3));
        first.Wait(17);
        first.Fire();
        Assert.Equal(second.Codes(3), first.Codes(3));
    }

    [Fact]
    public void A_device_that_dies_in_a_train_is_a_short_from_then_on()
    {
        var bench = new TestBench(
            FakeBench.Population.DevicePopulation.Named.Single(d => d.Defect == "dies-at-off2").Serial);
        bench.Charge(600);
        bench.Configure();
        bench.Fire();
        Assert.InRange(bench.Volts, 0, 1);
        Assert.Equal("2", TestBench.Ask(bench.Supply, "STAT:QUES:COND?"));
    }

    [Fact]
    public void An_attenuation_is_at_first_the_probes_own_and_can_be_set_and_asked_back()
    {
        TestBench bench = new();
        Assert.Equal(
            "1.0E+01;1.0E+02;1.0E+00",
            TestBench.Ask(bench.Scope, "INPut1:ATTenuation?;:INPut2:ATTenuation?;:INPut3:ATTenuation?"));
        TestBench.Say(bench.Scope, "INPut2:ATTenuation 10");
        Assert.Equal("1.0E+01", TestBench.Ask(bench.Scope, "INP2:ATT?"));
        TestBench.Say(bench.Scope, "*RST");
        Assert.Equal("1.0E+02", TestBench.Ask(bench.Scope, "INP2:ATT?"));
        TestBench.Refused(bench.Scope, "INP5:ATT 1", -114);
        TestBench.Refused(bench.Scope, "INP2:ATT 0", -222);
    }

    [Fact]
    public void A_wrong_attenuation_scales_what_is_recorded()
    {
        TestBench bench = Fired();
        double right = bench.Values(2)[..90].Average();
        TestBench.Say(bench.Scope, "INP2:ATT 50");
        bench.Fire();

        Assert.Equal(0.5 * right, bench.Values(2)[..90].Average(), 0.3);
    }

    [Fact]
    public void Triggered_at_once_it_records_the_bench_at_rest_and_no_train_is_fired()
    {
        TestBench bench = new();
        bench.Configure();
        TestBench.Say(bench.Scope, "INIT");
        TestBench.Say(bench.Scope, "TRIGger:SEQuence:IMMediate");
        Assert.Equal("8;0", TestBench.Ask(bench.Scope, "STAT:OPER:COND?;:SWE:COUN:ACT?"));
        bench.Wait(1e-3);
        Assert.Equal("0;1", TestBench.Ask(bench.Scope, "STAT:OPER:COND?;:SWE:COUN:ACT?"));
        Assert.Equal("0", TestBench.Ask(bench.Pulser, "PULS:COUN?"));

        // The gate's off level, then the probes' own offsets: 0.12 V, 0.06 A, 0.2 V.
        Assert.Equal(-3.99, bench.Values(1).Average(), 0.01);
        Assert.Equal(0.12, bench.Values(2).Average(), 0.05);
        Assert.Equal(0.06, bench.Values(3).Average(), 0.005);
        Assert.Equal(0.2, bench.Values(4).Average(), 0.05);
        Assert.Equal(2000, bench.Preamble(1)[0]);
    }

    [Fact]
    public void Triggered_at_once_it_shows_the_bus_as_it_stands_and_each_record_has_noise_of_its_own()
    {
        TestBench bench = new();
        bench.Charge(400);
        bench.Configure();
        TestBench.Say(bench.Scope, "INIT;:TRIG");
        bench.Wait(1e-3);
        short[] first = bench.Codes(2);
        Assert.Equal(400, bench.Values(2).Average(), 1.0);
        TestBench.Say(bench.Scope, "INIT;:TRIG");
        bench.Wait(1e-3);

        Assert.NotEqual(first, bench.Codes(2));
        TestBench.Refused(bench.Scope, "TRIG", -211);
    }

    private static TestBench Fired()
    {
        var bench = new TestBench();
        bench.Charge(600);
        bench.Configure();
        bench.Fire();
        return bench;
    }
}
