namespace BenchRunner.Safety.Supervision;

/// <summary>What the guardian does when heartbeats stay away.</summary>
public enum GuardianStep
{
    /// <summary>Ends the runner for good: one that was stopped must never resume.</summary>
    EndRunner,

    /// <summary>Brings the bench to the safe state by links of its own.</summary>
    MakeSafe,
}
