namespace BenchRunner.Acceptance.Events;

/// <summary>Something that happened at the bench: evidence row, console line and journal line are made of it.</summary>
/// <param name="At">When, UTC.</param>
/// <param name="Source">Who says so: <c>runner</c>, <c>watch</c>, <c>safe-state</c>, a role.</param>
/// <param name="Severity">How much it matters.</param>
/// <param name="Kind">A stable word, e.g. <c>capture-rejected</c>.</param>
/// <param name="Message">One line for a person.</param>
public sealed record BenchEvent(DateTimeOffset At, string Source, Severity Severity, string Kind, string Message);
