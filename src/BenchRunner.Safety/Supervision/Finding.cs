namespace BenchRunner.Safety.Supervision;

/// <summary>What a poll has found.</summary>
/// <param name="Kind">As the supervisor's table names it.</param>
/// <param name="Reason">In words; null where nothing is wrong.</param>
internal readonly record struct Finding(SupervisorEvent Kind, string? Reason)
{
    public Finding((SupervisorEvent Kind, string? Reason) found)
        : this(found.Kind, found.Reason)
    {
    }
}
