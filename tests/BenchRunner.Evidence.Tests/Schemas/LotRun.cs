using BenchRunner.Acceptance.Decisions;

namespace BenchRunner.Evidence.Tests.Schemas;

/// <summary>A run of the model; its outcomes are those of each scoring, none while it goes on.</summary>
internal sealed record LotRun(string Device, string? Lot, string Sequence, int Attempt)
{
    public string Uid { get; set; } = "";

    public List<Outcome> Outcomes { get; } = [];

    public bool IsEnded => Outcomes.Count > 0;

    /// <summary>Whether bench, safety chain or operator ended it, whatever a later scoring says.</summary>
    public bool IsStopped => IsEnded && Outcomes[0] == Outcome.Stopped;
}
