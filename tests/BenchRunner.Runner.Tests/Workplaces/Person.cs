using BenchRunner.Acceptance.Plans;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>A person who answers as told, and may do something at the bench first.</summary>
internal sealed class Person(string? answer, Func<Task>? first = null) : IConfirmation
{
    /// <summary>Whether the bench was said to be simulated, each time the person was asked.</summary>
    public List<bool> Asked { get; } = [];

    public async Task<string?> Confirm(Plan plan, bool simulated, CancellationToken cancel)
    {
        Asked.Add(simulated);
        if (first is not null)
        {
            await first();
        }

        return answer;
    }
}
