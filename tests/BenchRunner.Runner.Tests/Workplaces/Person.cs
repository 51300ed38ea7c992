using BenchRunner.Acceptance.Plans;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>A person who answers as told, and may do something at the bench first.</summary>
internal sealed class Person(string? answer, Func<Task>? first = null) : IOperator
{
    /// <summary>What was asked, each time the person was.</summary>
    public List<Closing> Asked { get; } = [];

    /// <summary>Whose place was asked for.</summary>
    public List<string> Acknowledged { get; } = [];

    /// <summary>Where a part is put; null: the person leaves at that question.</summary>
    public string? Place { get; init; } = "red bin";

    public bool CanAsk { get; init; } = true;

    public async Task<Confirmation?> Confirm(Plan plan, Closing closing, CancellationToken cancel)
    {
        Asked.Add(closing);
        if (first is not null)
        {
            await first().WaitAsync(cancel);
        }

        return answer is null ? null : new Confirmation(answer, CanAsk);
    }

    public Task<string?> WherePut(DeviceReport report, CancellationToken cancel)
    {
        Acknowledged.Add(report.Device);
        return Task.FromResult(Place);
    }
}
