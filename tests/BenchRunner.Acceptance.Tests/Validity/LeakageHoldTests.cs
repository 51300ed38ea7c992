using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Tests.Validity;

/// <summary>The hold: i = C ΔV/Δt. A bank of 50 uF that loses 4 V in 100 ms gives 2 mA.</summary>
public sealed class LeakageHoldTests
{
    private static readonly Bench _bench = Shipped.Bench with
    {
        BusCapacitance = 50e-6,
        EmptySocketCurrent = 0.1e-3,
        SupplyCurrentAccuracy = 1e-3,
    };

    private static readonly Sequence _sequence = Shipped.Rated with { Leakage = 2e-3 };

    [Fact]
    public void The_bank_s_own_discharge_less_the_empty_socket_is_the_leakage() =>
        Assert.Equal(1.9e-3, LeakageHold.Current(new LeakageReading(600, 0, 600, 596, 0.1), _bench), 1e-9);

    [Theory]
    [InlineData(596, true)]
    [InlineData(595.7, false)]
    [InlineData(600.2, true)]
    public void It_conforms_up_to_the_sequence_s_limit(double last, bool conforms) =>
        Assert.Equal(conforms, LeakageHold.Conforms(new LeakageReading(600, 0, 600, last, 0.1), _bench, _sequence));

    [Fact]
    public void Without_a_limit_nothing_is_decided_by_it() =>
        Assert.True(LeakageHold.Conforms(
            new LeakageReading(600, 0, 600, 300, 0.1), _bench, _sequence with { Leakage = null }));

    [Theory]
    [InlineData(5.1e-3, true)]
    [InlineData(5.2e-3, false)]
    public void The_supply_may_give_what_limit_empty_socket_and_three_accuracies_explain(double current, bool silent) =>
        Assert.Equal(silent, LeakageHold.Drawn(current, _bench, _sequence) is null);

    [Fact]
    public void A_supply_of_unknown_accuracy_says_nothing() =>
        Assert.Null(LeakageHold.Drawn(1, _bench with { SupplyCurrentAccuracy = null }, _sequence));

    [Fact]
    public void The_words_name_the_place_that_is_tested_and_the_one_that_is_not()
    {
        var reading = new LeakageReading(600, 0, 600, 596, 0.1);
        string low = LeakageHold.Words(reading, _bench, _sequence);
        Assert.Contains("1.9 mA leak through the low place at 600 V (at most 2 mA)", low, StringComparison.Ordinal);
        Assert.Contains("the other place is not tested", low, StringComparison.Ordinal);
        Assert.Contains(
            "the high place",
            LeakageHold.Words(reading, _bench, _sequence with { Position = DevicePosition.High }),
            StringComparison.Ordinal);
    }
}
