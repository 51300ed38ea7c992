using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tests.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Benches;

public sealed class BenchFileTests
{
    [Fact]
    public void Every_value_of_the_shipped_file_arrives_in_SI()
    {
        Bench bench = Read(Examples.Bench);
        Assert.Equal(("fake", 1, 5.0), (bench.Name, bench.Fake?.Seed, bench.Fake?.Pace));
        Assert.Equal((120e-6, 0.05, true), (bench.LoadInductance, bench.LoadResistance, bench.LoadToPositive));
        Assert.Equal((50e-6, 5e3, 1e-4), (bench.BusCapacitance, bench.Bleeder, bench.EmptySocketCurrent));
        Assert.Equal((2.5, 34e-9), (bench.ChargingCurrent, bench.LoopInductance));
        Assert.Equal((4.7, 2.2, 0.5), (bench.GateResistorOn, bench.GateResistorOff, bench.HighSideThreshold));
        Assert.Equal(new Shunt(5e-3, 5e-12), bench.Shunt);
        Assert.Equal((12, 1e-9, 1_000_000), (bench.ScopeBits, bench.ScopeFastestInterval, bench.ScopeMemory));
        Assert.Equal(new Envelope(900, 120, 10, 20e-6), bench.Envelope);
        Assert.Equal(23, bench.Ambient);
        Assert.False(bench.ExchangeByHand);
        Assert.Equal(["interlock", "pulser", "scope", "supply", "voltmeter"], bench.Roles.Keys.Order());
        Assert.Equal("bank", bench.Roles["voltmeter"].At);
        Assert.Equal((3, 1), (bench.Roles["supply"].Connections, bench.Roles["interlock"].Connections));
    }

    [Fact]
    public void A_bench_that_states_no_safety_has_the_usual_one_and_a_stricter_one_arrives_in_SI()
    {
        // What the shipped bench of simulated instruments says is more patient than the defaults.
        const string Said = "safety: { reply-within: 1500 ms, guardian-silence: 2 s }";
        Assert.Equal(SafetySettings.Usual with { ReplyWithin = 1.5, GuardianSilence = 2 }, Read(Examples.Bench).Safety);
        Assert.Equal(
            new SafetySettings(60, 0.35, 5, 0.35, 0.5), Read(Examples.Bench.With(Said, "# no safety")).Safety);
        Bench strict = Read(Examples.Bench.With(
            Said,
            "safety: { bus-down: 30 V, energy-down: 20 mJ, discharge-within: 1 s, reply-within: 100 ms, "
                + "guardian-silence: 300 ms }"));
        Assert.Equal(new SafetySettings(30, 0.02, 1, 0.1, 0.3), strict.Safety);
    }

    [Theory]
    [InlineData(50e-6, 60)]
    [InlineData(1e-3, 26.457513)]
    public void A_bank_is_down_below_voltage_and_energy_both(double capacitance, double below) =>
        // 350 mJ in 1 mF: V = sqrt(2 * 0.35 J / 1 mF).
        Assert.Equal(below, SafetySettings.Usual.DownBelow(capacitance), 1e-6);

    [Fact]
    public void The_shipped_channels_are_on_inputs_of_their_own_and_no_uncertainty_is_zero()
    {
        Bench bench = Read(Examples.Bench);
        Assert.Equal(
            [Channel.VgsLow, Channel.VdsLow, Channel.IdLow, Channel.VgsHigh, Channel.VdsHigh, Channel.Vbus],
            bench.Channels.Select(channel => channel.Channel));
        Assert.Equal([1, 2, 3, 4, 5, 6], bench.Channels.Select(channel => channel.Input));
        Assert.All(bench.Channels, channel =>
            Assert.True(channel is { GainUncertainty: > 0, OffsetUncertainty: > 0, SkewUncertainty: > 0 }));
        Assert.Single(bench.Channels, channel => channel.Probe is "shunt" or "ground-referenced");
    }

    [Fact]
    public void An_offset_that_is_not_stated_is_not_taken_for_zero()
    {
        Bench bench = Read(Examples.Bench);
        Assert.Null(Assert.Single(bench.Channels, channel => channel.Channel == Channel.IdLow).Offset);
        Assert.Equal(0, Assert.Single(bench.Channels, channel => channel.Channel == Channel.VdsLow).Offset);
    }

    [Fact]
    public void What_a_probe_bears_and_how_it_is_set_arrives_in_SI()
    {
        Bench bench = Read(Examples.Bench.With(
            "scope: 2, probe: differential, rating: 1500 V, common-mode: 1500 V, bandwidth: 500 MHz, attenuation: 100,",
            "scope: 2, probe: differential, rating: 1500 V, common-mode: 1 kV, bandwidth: 0.1 GHz, attenuation: 50, "
                + "delay: 12 ns,"));
        ChannelSetup setup = Assert.Single(bench.Channels, channel => channel.Channel == Channel.VdsLow);
        Assert.Equal((1000, 100e6, 12e-9, 50), (setup.CommonMode, setup.Bandwidth, setup.Delay, setup.Attenuation));
        Assert.Equal(1e-3, bench.SupplyCurrentAccuracy);
    }

    [Fact]
    public void What_a_probe_does_not_state_is_not_known()
    {
        Bench bench = Read(Examples.Bench
            .With(", bandwidth: 500 MHz, attenuation: 10, gain", ", gain").With(", current-accuracy: 1 mA", ""));
        ChannelSetup setup = bench.Channels[0];
        Assert.Equal((null, null, 0.0), (setup.Bandwidth, setup.Attenuation, setup.Delay));
        Assert.Null(bench.SupplyCurrentAccuracy);
        Assert.Null(bench.Envelope.Temperature);
    }

    [Fact]
    public void The_shipped_probes_have_the_attenuation_that_the_scope_is_told()
    {
        foreach (Bench bench in new[] { Shipped.Bench, Shipped.FourChannels })
        {
            Assert.All(bench.Channels, setup => Assert.Equal(
                setup.Channel switch
                {
                    Channel.VgsLow or Channel.VgsHigh => 10,
                    Channel.IdLow => 1,
                    _ => 100,
                },
                setup.Attenuation));
        }
    }

    [Fact]
    public void A_hotplate_comes_with_the_highest_temperature_of_its_plate()
    {
        Bench bench = Read(Examples.Bench
            .With("exchange: none", "  hotplate: { link: 'tcp 127.0.0.1:0', dialect: generic-hotplate }\nexchange: none")
            .With("pulse: 20 us }", "pulse: 20 us, temperature: 150 degC }"));
        Assert.Equal("generic-hotplate", bench.Roles["hotplate"].Dialect);
        Assert.Equal(150, bench.Envelope.Temperature);
    }

    [Fact]
    public void Real_instruments_need_no_fake_block()
    {
        Bench bench = Read(Examples.Bench
            .With("fake: { seed: 1, pace: 5 }\n", "")
            .With("'tcp 127.0.0.1:0'", "'tcp [fe80::1]:5025'")
            .With("'serial auto'", "'serial /dev/ttyUSB0 9600'")
            .With("exchange: none", "exchange: by-hand")
            .With("to: positive", "to: negative")
            .With("cautions: []", "cautions: ['Hang the sign on the door.']"));
        Assert.Null(bench.Fake);
        Assert.True(bench.ExchangeByHand);
        Assert.False(bench.LoadToPositive);
        Assert.Equal("tcp [fe80::1]:5025", bench.Roles["supply"].Link);
        Assert.Equal(["Hang the sign on the door."], bench.Cautions);
    }

    [Fact]
    public void Faults_arrive_as_written()
    {
        Bench bench = Read(Examples.Bench.With("pace: 5 }", "pace: 5, faults: [link-drops@block:3, stale-record] }"));
        Assert.Equal(["link-drops@block:3", "stale-record"], bench.Fake!.Faults);
    }

    [Fact]
    public void Places_lead_back_to_the_file()
    {
        Place place = Read(Examples.Bench).Keys["envelope.energy"];
        Assert.StartsWith(
            "10 J", Examples.Bench.Split('\n')[place.Line - 1][(place.Column - 1)..], StringComparison.Ordinal);
    }

    private static Bench Read(string text)
    {
        Read<Bench> read = BenchFile.Read(Readers.Source("bench.yaml", text));
        Assert.Empty(read.Problems);
        return read.Value!;
    }
}
