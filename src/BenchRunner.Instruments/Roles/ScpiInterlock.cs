using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Roles;

/// <summary>An interlock controller that speaks SCPI.</summary>
public sealed class ScpiInterlock : IInterlock, IDisposable
{
    private const int Flags = 4;

    // The watchdog's time is set in steps of the controller's clock, 1 ms and finer (common practice).
    private const double WatchdogStep = 2e-3;

    private static readonly string[] Operations =
        ["read-state", "bleeder-on", "bleeder-off", "read-bleeder", "set-watchdog", "read-watchdog"];

    private readonly Instrument _instrument;

    private ScpiInterlock(Instrument instrument) => _instrument = instrument;

    /// <inheritdoc/>
    public string Role => _instrument.Role;

    /// <inheritdoc/>
    public InstrumentIdentity Identity => _instrument.Session.Identity;

    /// <summary>Connects; nothing is switched.</summary>
    /// <exception cref="InstrumentException">Another instrument than the dialect is for, or no interlock
    /// controller.</exception>
    /// <exception cref="LinkException">Not reachable, or no SCPI.</exception>
    public static async Task<ScpiInterlock> Connect(InstrumentConnection connection, CancellationToken cancel) =>
        new(await Instrument.Connect("interlock", Operations, "read-state", connection, cancel));

    /// <inheritdoc/>
    /// <exception cref="LinkException">No answer, or none of four flags: the loop counts as open.</exception>
    /// <exception cref="InstrumentException">The controller was switched off and on.</exception>
    public async Task<InterlockState> Read(CancellationToken cancel) =>
        await _instrument.Session.AskSurely(_instrument.Command("read-state"), ParseState, cancel);

    /// <inheritdoc/>
    public async Task EngageBleeder(CancellationToken cancel)
    {
        await _instrument.Session.SetDown([_instrument.Command("bleeder-on")], cancel);
        if (!await _instrument.ReadBoolean("read-bleeder", cancel))
        {
            throw _instrument.Refusal("the bleeder stays off though it was engaged; the bank keeps its charge");
        }
    }

    /// <inheritdoc/>
    public async Task ReleaseBleeder(Permit permit, CancellationToken cancel)
    {
        Bounded.Live(permit);
        await _instrument.Session.Energise(permit, _instrument.Command("bleeder-off"), cancel);
        if (await _instrument.ReadBoolean("read-bleeder", cancel))
        {
            throw _instrument.Refusal("the bleeder stays on though it was released");
        }
    }

    /// <inheritdoc/>
    public async Task SetWatchdog(TimeSpan? time, CancellationToken cancel)
    {
        var seconds = time?.TotalSeconds ?? 0;
        Bounded.NotNegative(seconds, nameof(time));
        await _instrument.Session.Set(_instrument.Command("set-watchdog", seconds), cancel);
        await _instrument.CheckReadBack("set-watchdog", "read-watchdog", seconds, WatchdogStep, cancel);
    }

    /// <inheritdoc/>
    public Task MakeSafe(CancellationToken cancel) => EngageBleeder(cancel);

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _instrument.Dispose();

    private static InterlockState ParseState(ReadOnlySpan<byte> reply)
    {
        var flags = ReplyList.Elements(reply, Flags);
        return new InterlockState(Flag(flags, 0), Flag(flags, 1), Flag(flags, 2), Flag(flags, 3));
    }

    private static bool Flag(IReadOnlyList<string> flags, int at) =>
        ReplyWord.ParseBoolean(System.Text.Encoding.UTF8.GetBytes(flags[at]));
}
