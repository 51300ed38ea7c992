namespace BenchRunner.Evidence.Stores;

/// <summary>A run was begun that <see cref="EvidenceStore.Refuses"/> refuses.</summary>
/// <param name="refusal">Why.</param>
public sealed class RunRefusedException(RunRefusal refusal) : Exception(refusal.Message)
{
    /// <summary>Why the run may not begin.</summary>
    public RunRefusal Refusal { get; } = refusal;
}
