using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Roles;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Keeps the wire to one instrument: opens it, and opens it again where it broke and the options
/// allow it, to the same instrument only.</summary>
internal sealed class WireKeeper : IDisposable
{
    private readonly string _role;
    private readonly LinkAddress _address;
    private readonly SessionOptions _options;
    private readonly TimeProvider _time;
    private readonly IInstrumentLog _log;
    private readonly LinkOpener _opener;
    private readonly Repetition _connecting;
    private volatile ScpiWire _wire;
    private volatile int _connections;
    private bool _disposed;

    private WireKeeper(
        string role, LinkAddress address, SessionOptions options, TimeProvider time, IInstrumentLog log,
        LinkOpener opener)
    {
        _role = role;
        _address = address;
        _options = options;
        _time = time;
        _log = log;
        _opener = opener;
        _connecting = Repetition.Of(options.ConnectAttempts, options.ConnectPause, time);

        // Open fills both before it hands the keeper out.
        _wire = null!;
        Identity = null!;
    }

    /// <summary>What the instrument said it is.</summary>
    public InstrumentIdentity Identity { get; private set; }

    /// <summary>The link as the bench file names it.</summary>
    public string Link => _address.ToString();

    /// <summary>How often the link was opened.</summary>
    public int Connections => _connections;

    /// <summary>The wire in use, broken or not. From any thread.</summary>
    public ScpiWire Current => _wire;

    /// <summary>Connects, identifies the instrument and empties its error queue.</summary>
    /// <exception cref="InstrumentException">The queue speaks of broken hardware, and the options refuse that.</exception>
    public static async Task<WireKeeper> Open(
        string role,
        LinkAddress address,
        SessionOptions options,
        TimeProvider time,
        IInstrumentLog log,
        LinkOpener opener,
        CancellationToken cancel)
    {
        var keeper = new WireKeeper(role, address, options, time, log, opener);
        try
        {
            keeper._wire = await keeper.Connect(cancel);
            keeper.Identity = await keeper._wire.Ask("*IDN?", ReplyIdentity.Parse, cancel);
            var entries = await keeper._wire.ReadErrors(cancel);
            foreach (var entry in entries)
            {
                keeper.Report(InstrumentEventKind.Errors, $"the error queue held {entry} at the start");
            }

            if (options.RefuseHardwareErrors && entries.FirstOrDefault(entry => entry.IsOfHardware) is { } broken)
            {
                throw new InstrumentException(
                    role, $"its error queue held {broken} before anything was sent: the instrument says that it is not "
                        + $"in order; have it looked at before it is used again ({address})");
            }

            if (options.Habits.ErrorQuery is not null)
            {
                keeper._wire.Send("*CLS");
            }

            keeper.Report(InstrumentEventKind.Connected, $"is {keeper.Identity.Text}");
            return keeper;
        }
        catch
        {
            keeper.Dispose();
            throw;
        }
    }

    /// <summary>The wire in use, opened again where it broke and the options allow it. Only for the holder of the
    /// turn.</summary>
    public async ValueTask<ScpiWire> Ready(CancellationToken cancel)
    {
        ObjectDisposedException.ThrowIf(_disposed, typeof(ScpiSession));
        if (_wire.MustReopen)
        {
            _wire.Break(new LinkException(Link, "in doubt what it answers, and its dialect says: open it again"));
        }

        if (_wire.Broken is not { } why)
        {
            return _wire;
        }

        if (!_options.Reconnect)
        {
            throw new LinkException(Link, "is broken; connect the bench anew", why);
        }

        _wire.Dispose();
        var wire = await Connect(cancel);
        _wire = wire;
        var identity = await wire.Ask("*IDN?", ReplyIdentity.Parse, cancel);
        if (identity.Text != Identity.Text)
        {
            throw wire.Break(new LinkException(Link, $"now '{identity.Text}' answers where '{Identity.Text}' did"));
        }

        Report(InstrumentEventKind.Reconnected, "opened again; the same instrument answers, its settings are unknown");
        await wire.Ready(cancel);
        return wire;
    }

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose()
    {
        if (!_disposed)
        {
            _disposed = true;
            _wire?.Dispose();
        }
    }

    private async Task<ScpiWire> Connect(CancellationToken cancel)
    {
        var link = await _connecting.Run(
            static async (keeper, token) => await keeper._opener(
                keeper._address, keeper._options, keeper._time, token),
            this,
            cancel);
        _connections++;
        var wire = new ScpiWire(link, _options, _time, Report);
        if (_address.Kind == LinkKind.Serial)
        {
            // A serial line has no start of its own: half a command or half a reply of an earlier user may be under
            // way.
            wire.Terminate();
        }

        return wire;
    }

    private void Report(InstrumentEventKind kind, string message) =>
        _log.Report(new InstrumentEvent(_role, Link, kind, Printable.Text(message, 1024)));
}
