using BenchRunner.Acceptance.Validity;
using CsCheck;

namespace BenchRunner.Acceptance.Tests.Validity;

/// <summary>No capture is kept or thrown away for what is measured on it.</summary>
public sealed class MeasurandBlindnessTests
{
    [Fact]
    public void Recovery_and_ringing_from_half_to_three_times_nominal_change_no_verdict() =>
        Gen.Select(Gen.Double[20, 75], Gen.Double[0.03, 0.08], Gen.Int[1, 1000]).Sample(
            (recovery, damping, seed) =>
            {
                Verdict verdict = Judged.Of(
                    new SyntheticTrain { RecoveryCurrent = recovery, RingDamping = damping, Seed = seed });
                return verdict.IsValid && verdict.Findings.Count == 0 && verdict.NextRange.Count == 0
                    && verdict.CorrectedFirstPulse is null;
            },
            iter: 12);

    [Fact]
    public void No_criterion_looks_at_what_the_shipped_sequence_limits() =>
        Assert.Empty(Criteria.All.SelectMany(criterion => criterion.Uses)
            .Intersect(Shipped.Sequence.Limits.Select(limit => limit.Quantity)));
}
