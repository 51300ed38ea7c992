using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Uncertainty;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Uncertainty;

public sealed class BenchBudgetTests
{
    private static readonly IReadOnlyList<RawTrace> _traces =
        new SyntheticTrain().Record(Shipped.Point(Shipped.Rated, Shipped.Bench));

    private static readonly BenchBudget _shipped = Budget(Shipped.Bench);

    private static BenchBudget Budget(Bench bench) =>
        BenchBudget.Of(_traces, bench, Planner.AnalysisSettingsOf(Shipped.Bench, Shipped.Rated));

    /// <summary>The shipped bench as if it knew of errors in one channel alone: a budget of few analyses.</summary>
    private static Bench Only(Channel channel, Func<ChannelSetup, ChannelSetup>? change = null)
    {
        ChannelSetup setup = Shipped.Bench.Channels.Single(one => one.Channel == channel);
        return Shipped.Bench with { Channels = [change is null ? setup : change(setup)] };
    }

    private static QuantityBudget Of(BenchBudget budget, string quantity) =>
        budget.All.First(one => one.Quantity == quantity);

    private static double Standard(BenchBudget budget, string quantity) =>
        CombinedUncertainty.Of(Of(budget, quantity).Entries, 0.95).Standard;

    public static TheoryData<string, Channel, string> Entries => new()
    {
        { "eon", Channel.VdsLow, "gain" },
        { "eon", Channel.VdsLow, "skew" },
        { "eon", Channel.IdLow, "gain" },
        { "eon", Channel.IdLow, "offset" },
        { "eon", Channel.IdLow, "skew" },
        { "eoff", Channel.VdsLow, "skew" },
        { "vds_on", Channel.VdsLow, "offset" },
        { "vds_high_peak_1", Channel.VdsHigh, "gain" },
        { "vds_high_peak_1", Channel.VdsHigh, "offset" },
        { "bus_voltage", Channel.Vbus, "offset" },
        { "vgs_on", Channel.VgsLow, "gain" },
    };

    [Theory]
    [MemberData(nameof(Entries))]
    public void A_larger_stated_uncertainty_gives_a_larger_one_of_the_value(
        string quantity, Channel channel, string error)
    {
        BenchBudget stated = Budget(Only(channel));
        BenchBudget wider = Budget(Only(channel, setup => error switch
        {
            "gain" => setup with { GainUncertainty = 2 * setup.GainUncertainty },
            "offset" => setup with { OffsetUncertainty = 2 * setup.OffsetUncertainty },
            _ => setup with { SkewUncertainty = 2 * setup.SkewUncertainty },
        }));
        UncertaintyEntry entry = Of(stated, quantity).Entries.Single(one => one.Source == $"{channel.Name()} {error}");
        Assert.True(entry.Contribution > 0, $"{entry.Source} adds nothing to {quantity}");
        Assert.True(Standard(wider, quantity) > Standard(stated, quantity));
    }

    [Fact]
    public void A_gain_moves_a_level_in_proportion_and_an_offset_one_to_one()
    {
        // d(v)/d(gain) = −v for v = (recorded − offset)/gain, d(v)/d(offset) = −1 at gain 1.
        QuantityBudget onState = Of(_shipped, "vds_on");
        Assert.Equal(-1, onState.Entries.Single(entry => entry.Source == "vds_low offset").Sensitivity, 1e-3);
        QuantityBudget bus = Of(_shipped, "bus_voltage");
        Assert.Equal(-596.8, bus.Entries.Single(entry => entry.Source == "vbus gain").Sensitivity, 1);
        Assert.Equal(0.5, bus.Entries.Single(entry => entry.Source == "vbus offset").Contribution, 1e-3);
    }

    [Fact]
    public void A_turn_off_energy_moves_by_bus_and_current_for_each_second_of_skew()
    {
        // A current late by δ adds V I δ to an edge without recovery: 600 V · 40 A · 1 s, less the ends of the
        // interval.
        double sensitivity = Of(_shipped, "eoff").Entries.Single(entry => entry.Source == "id_low skew").Sensitivity;
        Assert.InRange(Math.Abs(sensitivity), 0.7 * 24000, 1.2 * 24000);
    }

    [Fact]
    public void Each_recorded_channel_has_gain_offset_skew_and_quantisation_in_every_budget() =>
        Assert.All(_shipped.All.Where(budget => budget.Reason is null), budget => Assert.Equal(
            4 * Shipped.Bench.Channels.Count, budget.Entries.Select(entry => entry.Source).Distinct().Count()));

    [Fact]
    public void An_error_stated_as_zero_adds_nothing_and_fewer_bits_add_more()
    {
        double stated = Standard(Budget(Only(Channel.VdsLow)), "vds_on");
        Bench perfect = Only(
            Channel.VdsLow, setup => setup with { OffsetUncertainty = 0, GainUncertainty = 0, SkewUncertainty = 0 });
        Assert.InRange(Standard(Budget(perfect), "vds_on"), 1e-3, 0.99 * stated);
        Assert.True(Standard(Budget(Only(Channel.VdsLow) with { ScopeBits = 8 }), "vds_on") > stated);
    }

    [Fact]
    public void The_same_capture_gives_the_same_bits()
    {
        BenchBudget again = Budget(Only(Channel.IdLow));
        foreach (QuantityBudget budget in _shipped.All)
        {
            Assert.Equal(
                budget.Entries.Where(entry => entry.Source.StartsWith("id_low", StringComparison.Ordinal)),
                again.Find(budget.Quantity, budget.Definition)!.Entries);
        }
    }
}
