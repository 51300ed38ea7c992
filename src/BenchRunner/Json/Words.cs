using BenchRunner.Acceptance.Decisions;

namespace BenchRunner.Json;

/// <summary>The words that JSON and evidence use for outcomes and conformities.</summary>
internal static class Words
{
    public static string Of(Outcome outcome) => outcome switch
    {
        Outcome.NotMeasured => "not-measured",
        _ => outcome.ToString().ToLowerInvariant(),
    };

    public static string Of(Conformity conformity) => conformity.ToString().ToLowerInvariant();
}
