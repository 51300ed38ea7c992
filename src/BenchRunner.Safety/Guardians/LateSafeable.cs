using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;

namespace BenchRunner.Safety.Guardians;

/// <summary>An instrument whose link the guardian opens when it must: at its start where the instrument admits one more
/// client, after it has ended the runner where it does not.</summary>
/// <param name="role">The role.</param>
/// <param name="open">Opens the link.</param>
/// <param name="time">The clock of the pauses.</param>
public sealed class LateSafeable(string role, Func<CancellationToken, Task<ISafeable>> open, TimeProvider time)
    : ISafeable, IAsyncDisposable
{
    private static readonly TimeSpan TryAgainAfter = TimeSpan.FromMilliseconds(50);
    private readonly LateOpening<ISafeable> _link = new(open);

    /// <inheritdoc/>
    public string Role => role;

    /// <summary>Opens the link now.</summary>
    /// <exception cref="LinkException">Not reachable.</exception>
    public Task Open(CancellationToken cancel) => _link.Get(cancel);

    /// <inheritdoc/>
    /// <remarks>Opening is tried until it is no longer waited for: a link that the runner held may be free a moment later
    /// than the runner was gone.</remarks>
    public async Task MakeSafe(CancellationToken cancel)
    {
        while (true)
        {
            try
            {
                await (await _link.Get(cancel)).MakeSafe(cancel);
                return;
            }
            catch (LinkException) when (!_link.IsOpen && !cancel.IsCancellationRequested)
            {
                await Task.Delay(TryAgainAfter, time, cancel);
            }
        }
    }

    /// <summary>Closes the link. Sends nothing.</summary>
    public ValueTask DisposeAsync() => _link.DisposeAsync();
}
