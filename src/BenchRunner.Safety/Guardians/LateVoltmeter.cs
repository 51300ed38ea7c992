using BenchRunner.Instruments.Roles;
using BenchRunner.Signals.Units;

namespace BenchRunner.Safety.Guardians;

/// <summary>A voltmeter whose link the guardian opens when it must; see <see cref="LateSafeable"/>.</summary>
/// <param name="open">Opens the link.</param>
public sealed class LateVoltmeter(Func<CancellationToken, Task<IVoltmeter>> open) : IVoltmeter, IAsyncDisposable
{
    private readonly LateOpening<IVoltmeter> _link = new(open);

    /// <inheritdoc/>
    /// <exception cref="InvalidOperationException">The link is not open yet: a caller's mistake.</exception>
    public InstrumentIdentity Identity => _link.IsOpen
        ? _link.Get(CancellationToken.None).Result.Identity
        : throw new InvalidOperationException("the voltmeter's link is not open yet");

    /// <summary>Opens the link now.</summary>
    /// <exception cref="Instruments.Links.LinkException">Not reachable.</exception>
    public Task Open(CancellationToken cancel) => _link.Get(cancel);

    /// <inheritdoc/>
    public async Task<Volts> Read(CancellationToken cancel) => await (await _link.Get(cancel)).Read(cancel);

    /// <summary>Closes the link. Sends nothing.</summary>
    public ValueTask DisposeAsync() => _link.DisposeAsync();
}
