using BenchRunner.Acceptance.Decisions;

namespace BenchRunner.Json;

/// <summary>The words that JSON uses for outcomes, the same as the evidence's.</summary>
internal static class Words
{
    public static string Of(Outcome outcome) =>
        outcome == Outcome.NotMeasured ? "not-measured" : outcome.ToString().ToLowerInvariant();
}
