using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Why the scope cannot record an operating point: too slow, or too little memory.</summary>
internal static class RecordRefusals
{
    /// <summary>All refusals of a point's time base.</summary>
    /// <param name="planned">The point as planned.</param>
    /// <param name="sampling">Its time base.</param>
    /// <param name="bench">The bench.</param>
    public static IEnumerable<Problem> Of(PlannedPoint planned, Sampling sampling, Bench bench)
    {
        if (sampling.Interval > sampling.Needed * (1 + 1e-9))
        {
            yield return new Problem(
                planned.Point.Where,
                $"the scope samples every {SiText.Format(sampling.Interval, "s")} at best",
                $"at most {SiText.Format(sampling.Needed, "s", 3)}, a tenth of the fastest edge and of a ring period",
                "choose a bench with a faster scope");
        }

        if (sampling.Samples > bench.ScopeMemory)
        {
            yield return new Problem(
                planned.Point.Where,
                $"the pulse train needs {sampling.Samples} samples of {SiText.Format(sampling.Interval, "s")}",
                $"at most the scope's {bench.ScopeMemory}",
                "shorten gap or pulses, or choose a bench with more memory or a smaller inductor");
        }
    }
}
