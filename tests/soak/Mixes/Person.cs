using BenchRunner.Acceptance.Plans;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Soak.Mixes;

/// <summary>The person at the bench: confirms or does not, and says where a part was put.</summary>
internal sealed class Person(bool confirms) : IOperator
{
    /// <inheritdoc/>
    public bool CanAsk => true;

    /// <inheritdoc/>
    public Task<Confirmation?> Confirm(Plan plan, Closing closing, CancellationToken cancel) =>
        Task.FromResult(confirms ? new Confirmation("A. Person", Asked: true) : null);

    /// <inheritdoc/>
    public Task<string?> WherePut(DeviceReport report, CancellationToken cancel) =>
        Task.FromResult<string?>("red bin");
}
