using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Validity;

public sealed class RejectedSharesTests
{
    private static Verdict Verdict(params string[] rejectedBy) => new(
        [.. rejectedBy.Select(criterion => Found(criterion, FindingClass.Retry))], [], null,
        new Dictionary<Channel, bool>());

    private static Finding Found(string criterion, FindingClass does) =>
        new(criterion, does, null, null, null, null, "found");

    [Fact]
    public void Each_criterion_counts_a_capture_once_and_more_than_half_is_said()
    {
        Verdict[] verdicts =
        [
            Verdict(), Verdict(Criteria.CurrentWithin), Verdict(Criteria.NoiseBelow, Criteria.NoiseBelow),
            Verdict(Criteria.NoiseBelow, Criteria.BusWithin), Verdict(Criteria.NoiseBelow),
        ];
        Assert.Equal(
            [
                new RejectedShare(Criteria.CurrentWithin, 1, 0, 5), new RejectedShare(Criteria.BusWithin, 1, 0, 5),
                new RejectedShare(Criteria.NoiseBelow, 3, 0, 5),
            ],
            RejectedShares.Of(verdicts));
        RejectedShare noise = RejectedShares.Of(verdicts)[^1];
        Assert.True(noise.IsAboveHalf);
        Assert.Equal(0.6, noise.Share, 1e-12);
        Assert.Equal(
            "noise-below rejected 3 of 5 captures (60 %), more than half: look at the bench", noise.Message);
        Assert.Equal("current-within rejected 1 of 5 captures (20 %)", RejectedShares.Of(verdicts)[0].Message);
    }

    [Fact]
    public void Half_is_not_more_than_half() =>
        Assert.False(Assert.Single(RejectedShares.Of([Verdict(), Verdict(Criteria.Fresh)])).IsAboveHalf);

    [Fact]
    public void A_stop_rejects_and_a_warning_does_not()
    {
        Verdict both = Verdict() with
        {
            Findings =
            [
                Found(Criteria.Desaturated, FindingClass.Stop), Found(Criteria.Settled, FindingClass.Warn),
            ],
        };
        Assert.Equal(Criteria.Desaturated, Assert.Single(RejectedShares.Of([both])).Criterion);
    }

    [Fact]
    public void What_was_not_evaluated_is_counted_and_not_as_met()
    {
        Verdict open = Verdict(Criteria.Fresh) with { NotEvaluated = [Criteria.BusDroop] };
        IReadOnlyList<RejectedShare> shares = RejectedShares.Of([open, open, Verdict()]);
        Assert.Equal(new RejectedShare(Criteria.BusDroop, 0, 2, 3), shares[^1]);
        Assert.Equal("bus-droop was not evaluated on 2 of 3 captures", shares[^1].Message);
    }

    [Fact]
    public void No_captures_and_sound_ones_have_no_rows()
    {
        Assert.Empty(RejectedShares.Of([]));
        Assert.Empty(RejectedShares.Of([Verdict()]));
    }
}
