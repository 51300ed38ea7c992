using BenchRunner.Acceptance.Decisions;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Json;

/// <summary>The words that text and JSON use: of outcomes, the evidence's own.</summary>
internal static class Words
{
    public static string Of(Outcome outcome) =>
        outcome == Outcome.NotMeasured ? "not-measured" : outcome.ToString().ToLowerInvariant();

    public static string Of(BaselineSource source) =>
        source == BaselineSource.BeforeOn1 ? "before-on1" : source.ToString().ToLowerInvariant();
}
