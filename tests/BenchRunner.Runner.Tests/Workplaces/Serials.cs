using BenchRunner.Runner.Sessions;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>Serials known beforehand, as from a command line.</summary>
internal sealed class Serials(params string[] serials) : IDeviceSource
{
    private readonly Queue<string> _waiting = new(serials);

    public IReadOnlyList<string> Waiting => [.. _waiting];

    public bool FromReader { get; init; }

    public Task<string?> Next(CancellationToken cancel) =>
        Task.FromResult(_waiting.TryDequeue(out string? next) ? next : null);
}
