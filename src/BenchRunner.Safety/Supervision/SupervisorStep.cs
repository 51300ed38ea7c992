namespace BenchRunner.Safety.Supervision;

/// <summary>What the table says to an event.</summary>
/// <param name="To">The state after it.</param>
/// <param name="Acts">What is to be done.</param>
/// <param name="Missing">What it would have needed and was not so; with it nothing happens but a refusal.</param>
public readonly record struct SupervisorStep(
    SupervisorState To, SupervisorActs Acts, SupervisorFacts Missing)
{
    /// <summary>Whether it was let happen.</summary>
    public bool IsAllowed => !Acts.HasFlag(SupervisorActs.Refuse);
}
