using BenchRunner.Instruments.Roles;

namespace BenchRunner.Safety.Guardians;

/// <summary>An instrument whose link the guardian opens when it must: at its start where the instrument admits one more
/// client, after it has ended the runner where it does not.</summary>
/// <param name="role">The role.</param>
/// <param name="open">Opens the link.</param>
public sealed class LateSafeable(string role, Func<CancellationToken, Task<ISafeable>> open) : ISafeable, IDisposable
{
    private readonly LateOpening<ISafeable> _link = new(open);

    /// <inheritdoc/>
    public string Role => role;

    /// <summary>Opens the link now.</summary>
    /// <exception cref="Instruments.Links.LinkException">Not reachable.</exception>
    public Task Open(CancellationToken cancel) => _link.Get(cancel);

    /// <inheritdoc/>
    public async Task MakeSafe(CancellationToken cancel) => await (await _link.Get(cancel)).MakeSafe(cancel);

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _link.Dispose();
}
