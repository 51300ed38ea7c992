using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Tests.Validity;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Decisions;

/// <summary>Whose fault a stop is.</summary>
public sealed class StopOutcomeTests
{
    [Theory]
    [InlineData(Criteria.Desaturated, DevicePosition.Low, Outcome.Rejected)]
    [InlineData(Criteria.HighSideOff, DevicePosition.Low, Outcome.Stopped)]
    [InlineData(Criteria.HighSideOff, DevicePosition.Both, Outcome.Rejected)]
    [InlineData(Criteria.FreewheelingOpen, DevicePosition.Low, Outcome.Stopped)]
    [InlineData(Criteria.FreewheelingOpen, DevicePosition.Both, Outcome.Rejected)]
    [InlineData(Criteria.BusAgrees, DevicePosition.Both, Outcome.Stopped)]
    [InlineData(Criteria.RampStraightness, DevicePosition.Both, Outcome.Stopped)]
    [InlineData(Criteria.CurrentWithin, DevicePosition.Both, Outcome.Stopped)]
    [InlineData(Criteria.GateLevels, DevicePosition.Both, Outcome.Stopped)]
    [InlineData(Criteria.TwoPulses, DevicePosition.Both, Outcome.Stopped)]
    [InlineData(Criteria.Fresh, DevicePosition.Both, Outcome.Stopped)]
    public void A_stop_rejects_the_device_only_where_the_place_at_fault_is_under_test(
        string criterion, DevicePosition position, Outcome outcome) =>
        Assert.Equal(outcome, Of(Context(position), Stop(criterion)).Outcome);

    [Fact]
    public void A_switch_that_is_open_has_no_current_at_its_target_either_and_is_named_as_the_cause()
    {
        (Outcome outcome, Finding cause) = Of(
            Context(DevicePosition.Low), Stop(Criteria.CurrentWithin), Stop(Criteria.Desaturated),
            Stop(Criteria.BusAgrees));

        Assert.Equal((Outcome.Rejected, Criteria.Desaturated), (outcome, cause.Criterion));
    }

    [Theory]
    [InlineData(DevicePosition.Low, Outcome.Stopped)]
    [InlineData(DevicePosition.Both, Outcome.Rejected)]
    public void A_current_far_above_its_target_lays_the_blame_on_the_place_beside_the_switch(
        DevicePosition position, Outcome outcome)
    {
        CaptureContext context = Context(position);
        context = context with
        {
            Analysis = context.Analysis with { Train = context.Analysis.Train with { OffCurrent = 830 } },
        };
        Assert.Equal(outcome, Of(context, Stop(Criteria.Desaturated)).Outcome);
        Finding clipped = new(
            Criteria.NotClipped, FindingClass.Retry, Channel.IdLow, null, null, null, "at a rail of the ADC");
        Assert.Equal(outcome, Of(Context(position), clipped, Stop(Criteria.Desaturated)).Outcome);
    }

    [Theory]
    [InlineData(DevicePosition.Low, DeviceKind.Mosfet, Outcome.Rejected)]
    [InlineData(DevicePosition.High, DeviceKind.Mosfet, Outcome.Rejected)]
    [InlineData(DevicePosition.Both, DeviceKind.Mosfet, Outcome.Rejected)]
    [InlineData(DevicePosition.High, DeviceKind.Diode, Outcome.Stopped)]
    public void A_short_is_one_of_the_place_that_blocks(DevicePosition position, DeviceKind kind, Outcome outcome) =>
        Assert.Equal(outcome, StopOutcome.OfShort(Shipped.Rated with { Position = position, Kind = kind }));

    private static CaptureContext Context(DevicePosition position) =>
        Judged.Context() with { Sequence = Shipped.Rated with { Position = position } };

    private static (Outcome Outcome, Finding Cause) Of(CaptureContext context, params Finding[] findings) =>
        StopOutcome.Of(context, new Verdict(findings, [], null, new Dictionary<Channel, bool>()));

    private static Finding Stop(string criterion) => new(criterion, FindingClass.Stop, null, null, null, null, "");
}
