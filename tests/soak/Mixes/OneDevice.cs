using BenchRunner.Runner.Sessions;

namespace BenchRunner.Soak.Mixes;

/// <summary>One serial, as from the command line.</summary>
internal sealed class OneDevice(string serial) : IDeviceSource
{
    private string? _next = serial;

    /// <inheritdoc/>
    public IReadOnlyList<string> Waiting => _next is null ? [] : [_next];

    /// <inheritdoc/>
    public bool FromReader => false;

    /// <inheritdoc/>
    public Task<string?> Next(CancellationToken cancel)
    {
        string? next = _next;
        _next = null;
        return Task.FromResult(next);
    }
}
