using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Uncertainty;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Acceptance.Tests.Decisions;

public sealed class DeciderTests
{
    private static readonly AnalysisSettings _settings = Planner.AnalysisSettingsOf(Shipped.Bench, Shipped.Rated);

    private static readonly PlannedPoint _planned = Shipped.Point(Shipped.Rated, Shipped.Bench);

    private static readonly BenchBudget _budget = BenchBudget.Of(
        new SyntheticTrain { Seed = 100 }.Record(_planned), Shipped.Bench, _settings);

    private static readonly AnalysisResult[] _analyses =
    [
        .. Enumerable.Range(100, 6).Select(seed => WaveformAnalysis.Analyse(
            TraceConversion.ToWaveform(new SyntheticTrain { Seed = seed }.Record(_planned)), _settings)),
    ];

    private static PointCaptures Captures(int valid) => new("rated", 20, [.. _analyses.Take(valid)], _budget);

    private static double Mean(string quantity) =>
        Spread.Of([.. _analyses.Take(5)
            .Select(one => one.Quantities.First(value => value.Quantity == quantity).Value!.Value)]).Mean;

    private static Sequence Limited(params (string Quantity, double? Lower, double? Upper)[] limits) =>
        Shipped.Rated with
        {
            Limits = [.. limits.Select(limit =>
            Shipped.Rated.Limits[0] with { Quantity = limit.Quantity, Lower = limit.Lower, Upper = limit.Upper })],
        };

    private static DeviceDecision Decide(Sequence sequence, int valid = 5) =>
        Decider.Decide(sequence, Shipped.Bench, [Captures(valid)]);

    [Fact]
    public void A_device_far_inside_its_limits_is_accepted_without_a_reason()
    {
        DeviceDecision decision = Decide(Limited(("vds_peak_off", null, 1.2 * Mean("vds_peak_off"))));
        Assert.Equal(Outcome.Accepted, decision.Outcome);
        Assert.Null(decision.Reason);
        MeasuredValue value = decision.Values.Single(one => one.Conformity is not null);
        Assert.Equal(Mean("vds_peak_off"), value.Value!.Value, 1e-12);
        Assert.Equal(5, value.Captures);
        Assert.Equal(value.CoverageFactor!.Value * value.StandardUncertainty!.Value, value.ExpandedUncertainty!.Value,
            1e-12);
        Assert.Equal("peak/raw", value.Definition);
    }

    [Fact]
    public void A_value_within_its_guard_band_is_undecided_and_says_why()
    {
        DeviceDecision decision = Decide(Limited(("vds_peak_off", null, Mean("vds_peak_off") + 1)));
        Assert.Equal(Outcome.Undecided, decision.Outcome);
        Assert.Contains("vds_peak_off at rated: ", decision.Reason, StringComparison.Ordinal);
        Assert.Contains("within the guard band of", decision.Reason, StringComparison.Ordinal);
    }

    [Fact]
    public void A_limit_that_fails_rejects_whatever_else_is_open()
    {
        DeviceDecision decision = Decide(Limited(
            ("vds_peak_off", null, Mean("vds_peak_off") + 1), ("vds_on", null, 0.5 * Mean("vds_on"))), valid: 3);
        Assert.Equal(Outcome.Rejected, decision.Outcome);
        Assert.StartsWith("vds_on at rated: ", decision.Reason, StringComparison.Ordinal);
    }

    [Fact]
    public void Too_few_valid_captures_are_not_a_measurement()
    {
        DeviceDecision decision = Decide(Limited(("vds_peak_off", null, 2000)), valid: 3);
        Assert.Equal(Outcome.NotMeasured, decision.Outcome);
        Assert.Equal("rated: 3 valid of 20 captures, 5 wanted", decision.Reason);
    }

    [Fact]
    public void A_point_that_was_not_run_is_not_a_measurement_and_its_limits_have_rows()
    {
        DeviceDecision decision = Decider.Decide(Shipped.Rated, Shipped.Bench, []);
        Assert.Equal(Outcome.NotMeasured, decision.Outcome);
        Assert.Equal(Shipped.Rated.Limits.Count,
            decision.Values.Count(value => value.Conformity == Conformity.Undecided));
        Assert.All(decision.Values, value => Assert.Equal("no valid capture", value.Reason));
    }

    [Fact]
    public void A_limited_quantity_that_was_not_formed_is_undecided_with_its_reason()
    {
        AnalysisResult[] without = [.. _analyses.Take(5).Select(one => one with
        {
            Quantities = [.. one.Quantities.Select(value =>
                value.Quantity == "qrr" ? value with { Value = null, Reason = "end undecided" } : value)],
        })];
        DeviceDecision decision = Decider.Decide(
            Limited(("qrr", null, 1)), Shipped.Bench, [new PointCaptures("rated", 5, without, _budget)]);
        Assert.Equal(Outcome.Undecided, decision.Outcome);
        Assert.Contains("qrr at rated: no value, limit at most 1 C (end undecided)", decision.Reason,
            StringComparison.Ordinal);
    }

    [Fact]
    public void Every_quantity_that_the_channels_allow_has_a_row_limited_or_not()
    {
        IReadOnlyList<MeasuredValue> values = Decide(Shipped.Rated).Values;
        string[] expected = [.. QuantityCatalogue.All.Select(quantity => quantity.Name)];
        Assert.Equal(expected, values.Select(value => value.Quantity).Distinct());
        Assert.Equal("qrr/chord-90-25@id_low-iL", values.Single(value => value.Quantity == "qrr").Definition);
        Assert.All(values, value => Assert.True(value.Value is not null || value.Reason is not null));
    }

    [Fact]
    public void A_quantity_whose_channel_is_not_recorded_has_no_row()
    {
        IReadOnlyList<MeasuredValue> values = Decider.Decide(
            Limited(("vds_peak_off", null, 2000)), Shipped.FourChannels, [Captures(5)]).Values;
        Assert.DoesNotContain(values, value => value.Quantity == "bus_droop");
        Assert.Contains(values, value => value.Quantity == "qrr");
    }

    [Fact]
    public void A_limit_that_names_a_route_is_not_applied_to_the_other()
    {
        Sequence sequence = Limited(("qrr", null, 1));
        sequence = sequence with { Limits = [sequence.Limits[0] with { Definition = "qrr/fall-10" }] };
        MeasuredValue value = Decide(sequence).Values.Single(one => one.Conformity is not null);
        Assert.Null(value.Value);
        Assert.Equal("qrr/fall-10 was not formed", value.Reason);
    }

    [Fact]
    public void A_wider_spread_and_fewer_captures_give_a_larger_uncertainty()
    {
        double Expanded(int valid) => Decide(Limited(("ring_frequency", 1, 1e12)), valid).Values
            .Single(value => value.Conformity is not null).ExpandedUncertainty!.Value;
        Assert.True(Expanded(2) > Expanded(5));
    }

    [Fact]
    public void One_capture_has_no_known_spread_and_leaves_a_guarded_limit_open()
    {
        MeasuredValue value = Decide(Limited(("vds_peak_off", null, 2000)), valid: 1)
            .Values.Single(one => one.Conformity is not null);
        Assert.Equal(Conformity.Undecided, value.Conformity);
        Assert.Contains("one capture", value.Reason, StringComparison.Ordinal);
        Assert.NotNull(value.Value);
    }

    [Fact]
    public void Everything_is_decided_once_no_limit_of_the_point_is_open()
    {
        Sequence far = Limited(("vds_peak_off", null, 2000));
        Assert.True(Decider.IsEverythingDecided(far, Shipped.Bench, Captures(5)));
        Assert.False(Decider.IsEverythingDecided(far, Shipped.Bench, Captures(4)));
        Assert.False(Decider.IsEverythingDecided(
            Limited(("vds_peak_off", null, Mean("vds_peak_off"))), Shipped.Bench, Captures(5)));
    }

    [Fact]
    public void Higher_points_are_left_out_where_a_failed_limit_says_so()
    {
        Sequence fails = Limited(("vds_peak_off", null, 10));
        Assert.False(Decider.SkipsHigher(fails, Shipped.Bench, Captures(5)));
        Assert.True(Decider.SkipsHigher(
            fails with { Limits = [fails.Limits[0] with { ElseSkipHigher = true }] }, Shipped.Bench, Captures(5)));
        Assert.True(Decider.SkipsHigher(
            fails with { OperatingPoints = [fails.OperatingPoints[0] with { ElseSkipHigher = true }] },
            Shipped.Bench, Captures(5)));
    }

    [Fact]
    public void The_same_captures_give_the_same_decision_to_the_last_bit() =>
        Assert.Equal(Decide(Shipped.Rated).Values, Decide(Shipped.Rated).Values);
}
