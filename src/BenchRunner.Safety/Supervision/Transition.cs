namespace BenchRunner.Safety.Supervision;

/// <summary>One line of the supervisor's table.</summary>
/// <param name="From">The state.</param>
/// <param name="On">What happens.</param>
/// <param name="To">The state after it.</param>
/// <param name="Needs">What must be so; else nothing happens but a refusal.</param>
/// <param name="Acts">What is done.</param>
public sealed record Transition(
    SupervisorState From, SupervisorEvent On, SupervisorState To, SupervisorFacts Needs, SupervisorActs Acts);
