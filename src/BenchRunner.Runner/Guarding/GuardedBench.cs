using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Runner.Benches;
using BenchRunner.Safety;
using BenchRunner.Safety.Guardians;

namespace BenchRunner.Runner.Guarding;

/// <summary>The bench as its guardian reaches it: what can be made safe, and the voltmeter.</summary>
/// <remarks>Where an instrument serves two clients or more, one of the links is the guardian's from the start; otherwise it
/// is opened after the runner was ended, which sets it free.</remarks>
public sealed class GuardedBench : IAsyncDisposable
{
    private readonly List<LateSafeable> _instruments = [];
    private readonly List<LateSafeable> _own = [];
    private readonly LateVoltmeter _voltmeter;
    private readonly bool _ownVoltmeter;
    private readonly TimeProvider _time;
    private ScpiInterlock? _interlock;

    /// <summary>Opens nothing yet.</summary>
    public GuardedBench(BenchLinks links, IInstrumentLog log, TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(links);
        _time = time;
        var options = new SessionOptions();
        InstrumentConnection To(string role) => links.To(role, options, log, time);
        LateSafeable pulser = Late(links, "pulser", async cancel => await ScpiPulser.Connect(To("pulser"), cancel));
        LateSafeable supply = Late(links, "supply", async cancel => await ScpiSupply.Connect(To("supply"), cancel));
        LateSafeable bleeder = Late(
            links, "interlock", async cancel => _interlock = await ScpiInterlock.Connect(To("interlock"), cancel));
        LateSafeable? plate = links.Bench.Roles.ContainsKey("hotplate")
            ? Late(links, "hotplate", async cancel => await ScpiHotplate.Connect(To("hotplate"), cancel)) : null;
        _voltmeter = new LateVoltmeter(async cancel => await ScpiVoltmeter.Connect(
            links.To("voltmeter", SessionOptions.Watching, log, time), cancel));
        _ownVoltmeter = links.Connections("voltmeter") > 1;
        Roles = new SafeableRoles(pulser, supply, bleeder, _voltmeter, plate);
    }

    /// <summary>All that the safe state needs.</summary>
    public SafeableRoles Roles { get; }

    /// <summary>What has a link of the guardian's own.</summary>
    public IReadOnlyList<ISafeable> Own => _own;

    /// <summary>Opens the guardian's own links.</summary>
    /// <exception cref="LinkException">An instrument is not reachable.</exception>
    /// <exception cref="InstrumentException">An instrument is of the wrong kind.</exception>
    public Task Open(CancellationToken cancel) => Task.WhenAll(
        [.. _own.Select(instrument => instrument.Open(cancel)),
            _ownVoltmeter ? _voltmeter.Open(cancel) : Task.CompletedTask]);

    /// <summary>Takes the interlock controller's own watchdog off: of a bench that is proved down, and whose latch stands.
    /// Otherwise it would act on the next run's bench.</summary>
    /// <exception cref="LinkException">Not reachable; it stays armed.</exception>
    public Task TakeOffWatchdog(CancellationToken cancel) => _interlock?.SetWatchdog(null, cancel) ?? Task.CompletedTask;

    /// <summary>Closes every link. Sends nothing.</summary>
    public async ValueTask DisposeAsync()
    {
        foreach (LateSafeable instrument in _instruments)
        {
            await instrument.DisposeAsync();
        }

        await _voltmeter.DisposeAsync();
    }

    private LateSafeable Late(BenchLinks links, string role, Func<CancellationToken, Task<ISafeable>> open)
    {
        var instrument = new LateSafeable(role, open, _time);
        _instruments.Add(instrument);
        if (links.Connections(role) > 1)
        {
            _own.Add(instrument);
        }

        return instrument;
    }
}
