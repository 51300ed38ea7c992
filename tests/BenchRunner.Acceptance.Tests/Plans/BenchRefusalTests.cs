using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;
using static BenchRunner.Acceptance.Tests.Plans.Refusals;

namespace BenchRunner.Acceptance.Tests.Plans;

/// <summary>Each refusal of a bench fires on files whose only flaw it is.</summary>
public sealed class BenchRefusalTests
{
    [Theory]
    [InlineData("supply")]
    [InlineData("pulser")]
    [InlineData("voltmeter")]
    public void A_role_that_the_guardian_cannot_reach_is_refused(string role)
    {
        Refused(Shipped.Rated, With(role, setup => setup with { Connections = 1 }), $"{role} serves one connection",
            "guardian");
        Refused(
            Shipped.Rated,
            Shipped.Bench with { Roles = Shipped.Bench.Roles.Where(pair => pair.Key != role).ToDictionary() },
            $"has no {role}");
    }

    [Fact]
    public void A_voltmeter_away_from_the_bank_is_refused()
    {
        Refused(Shipped.Rated, With("voltmeter", setup => setup with { At = "output" }), "the voltmeter is at output",
            "at: bank");
        Refused(Shipped.Rated, With("voltmeter", setup => setup with { At = null }), "states no place");
    }

    [Fact]
    public void A_bleeder_that_cannot_bring_the_bank_down_in_time_is_refused()
    {
        // 50 uF and 60 kOhm from the sequence's 600 V to 60 V: 3 s * ln(10) = 6.908 s.
        Refused(
            Shipped.Rated, Shipped.Bench with { Bleeder = 60e3 }, "from 600 V to 60 V in 6.908 s", "at most 5 s");
        Refused(
            Shipped.Rated,
            Shipped.Bench with { Safety = SafetySettings.Usual with { DischargeWithin = 0.5 } }, "in 575.6 ms");
    }

    [Fact]
    public void A_load_on_the_wrong_rail_is_refused() =>
        Refused(bench => bench with { LoadToPositive = false }, "the low switch fires", "positive rail");

    [Fact]
    public void A_bench_that_does_not_record_the_firing_switch_is_refused() =>
        Refused(
            Limited("ring_damping", 0.04, null),
            Without(Channel.IdLow),
            "does not record id_low");

    [Theory]
    [InlineData(Channel.VdsHigh, "ground-referenced")]
    [InlineData(Channel.VgsHigh, "ground-referenced")]
    public void An_earthed_probe_on_the_high_side_is_refused(Channel channel, string probe) =>
        Refused(Shipped.Rated, With(channel, setup => setup with { Probe = probe }),
            $"{channel.Name()} has a {probe} probe");

    [Fact]
    public void A_channel_without_uncertainty_is_refused()
    {
        Refused(
            Shipped.Rated, With(Channel.IdLow, setup => setup with { GainUncertainty = 0 }),
                "id_low states no uncertainty of its gain");
        Refused(
            Shipped.Rated, With(Channel.IdLow, setup => setup with { SkewUncertainty = 0 }),
                "id_low states no uncertainty of its skew");
    }

    [Fact]
    public void Two_earth_points_are_refused() =>
        Refused(
            Shipped.Rated, With(Channel.VdsLow, setup => setup with { Probe = "ground-referenced" }),
            "vds_low is earthed at the low source", "id_low at the negative rail", "one earth point");

    [Fact]
    public void A_shunt_in_a_load_that_swings_is_refused()
    {
        ChannelSetup shunt = Shipped.Bench.Channels.Single(setup => setup.Channel == Channel.IdLow);
        Bench bench = Shipped.Bench with
        {
            Channels = [.. Shipped.Bench.Channels, shunt with { Channel = Channel.ILoad, Input = 7 }],
        };
        Refused(Shipped.Rated, bench, "i_load has a shunt probe");
        Bench clamped = bench with
        {
            Channels = [.. Shipped.Bench.Channels, shunt with { Channel = Channel.ILoad, Input = 7, Probe = "clamp" }],
        };
        Assert.Empty(Planner.Plan(Shipped.Rated, clamped).Refusals.Select(problem => problem.ToString()));
    }

    [Theory]
    [InlineData(Channel.VgsHigh)]
    [InlineData(Channel.VdsHigh)]
    public void A_floating_probe_bears_bus_and_overshoot_to_earth(Channel channel)
    {
        Refused(
            Shipped.Rated, With(channel, setup => setup with { CommonMode = 700 }), $"the inputs of {channel.Name()}",
            "bear 700 V", "swing to 786", "common-mode");
        Assert.Empty(Planner.Plan(Shipped.Rated, With(channel, setup => setup with { CommonMode = 790 })).Refusals);
    }

    [Fact]
    public void A_probe_at_the_low_side_does_not_swing() =>
        Assert.Empty(
            Planner.Plan(Shipped.Rated, With(Channel.VgsLow, setup => setup with { CommonMode = 100 })).Refusals);

    [Theory]
    [InlineData(Channel.VdsLow)]
    [InlineData(Channel.IdLow)]
    [InlineData(Channel.VgsLow)]
    public void A_probe_slower_than_the_fastest_edge_is_refused(Channel channel)
    {
        // Rise time 0.35 / bandwidth (common practice): 30 MHz rise in 11.7 ns, the fastest edge is 10 ns.
        Refused(
            Shipped.Rated, With(channel, setup => setup with { Bandwidth = 30e6 }), $"the probe of {channel.Name()}",
            "11.7 ns", "0.35 over 30 MHz", "10 ns", "measures itself");
        Assert.Empty(Planner.Plan(Shipped.Rated, With(channel, setup => setup with { Bandwidth = 36e6 })).Refusals);
    }

    [Fact]
    public void A_bus_probe_has_no_edges_to_be_too_slow_for()
    {
        Planned planned = Planner.Plan(Shipped.Rated, With(Channel.Vbus, setup => setup with { Bandwidth = 1e6 }));
        Assert.Empty(planned.Refusals);
        Assert.Empty(planned.Notes);
    }

    [Fact]
    public void A_probe_that_lengthens_an_edge_is_noted_and_not_refused()
    {
        // 50 MHz rise in 7 ns; √(10² + 7²) = 12.2 ns.
        Planned planned = Planner.Plan(Shipped.Rated, With(Channel.VdsLow, setup => setup with { Bandwidth = 50e6 }));
        Assert.Empty(planned.Refusals);
        string note = Assert.Single(planned.Notes).ToString();
        Assert.Contains("vds_low rises in 7 ns and lengthens the fastest edge of 10 ns by 22 %", note,
            StringComparison.Ordinal);
    }

    [Fact]
    public void What_a_probe_does_not_state_is_noted()
    {
        Assert.Empty(Planner.Plan(Shipped.Rated, Shipped.Bench).Notes);
        Planned planned = Planner.Plan(
            Shipped.Rated,
            With(Channel.VdsHigh, setup => setup with { Rating = null, CommonMode = null, Bandwidth = null }));
        Assert.Empty(planned.Refusals);
        Assert.Contains(
            "vds_high states no rating and no common-mode and no bandwidth",
            Assert.Single(planned.Notes).ToString(), StringComparison.Ordinal);
        Assert.Empty(Planner.Plan(
            Shipped.Rated, With(Channel.VdsLow, setup => setup with { CommonMode = null })).Notes);
    }

    [Fact]
    public void A_diode_in_the_low_place_wants_the_channels_of_the_high_switch_and_the_load_on_the_other_rail()
    {
        Sequence diode = Shipped.Rated with
        {
            Kind = DeviceKind.Diode,
            Position = DevicePosition.Low,
            Limits = [Shipped.Rated.Limits.Single(limit => limit.Quantity == "qrr")],
        };
        string[] messages = [.. Planner.Plan(diode, Shipped.Bench).Refusals.Select(problem => problem.ToString())];
        Assert.Contains(messages, text => text.Contains("the high switch fires", StringComparison.Ordinal));
        Assert.Contains(messages, text => text.Contains("does not record id_high", StringComparison.Ordinal));
    }

    [Theory]
    [InlineData(Channel.VdsLow, 700, "786")]
    [InlineData(Channel.IdLow, 50, "54.75 A")]
    [InlineData(Channel.Vbus, 500, "600 V")]
    [InlineData(Channel.VgsLow, 10, "18 V")]
    public void A_probe_beyond_its_rating_is_refused(Channel channel, double rating, string sees) =>
        Refused(
            Shipped.Rated, With(channel, setup => setup with { Rating = rating }), $"probe of {channel.Name()}",
                "rated", sees);
}
