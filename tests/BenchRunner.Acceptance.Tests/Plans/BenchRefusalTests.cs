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
