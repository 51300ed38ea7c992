using System.Text;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Instruments.Roles;

/// <summary>A digitiser that speaks SCPI and gives 16 bit codes.</summary>
public sealed class ScpiScope : IScope, IDisposable
{
    private const int Sweeping = 3;
    private const int WaitsForTrigger = 5;
    private const string DegaussOperation = "degauss";
    private const string PreamblesOperation = "read-all-preambles";

    private static readonly TimeSpan Pause = TimeSpan.FromMilliseconds(1);

    private static readonly string[] Operations =
    [
        "set-attenuation", "read-attenuation", "set-range", "read-range", "set-offset", "read-offset",
        "set-interval", "read-interval", "set-points", "read-points", "set-pretrigger", "read-pretrigger",
        "set-trigger-source", "read-trigger-source", "set-trigger-level", "read-trigger-level", "set-trigger-slope",
        "set-format", "read-format", "set-byte-order", "read-byte-order",
        "arm", "trigger", "abort", "read-condition", "read-count", "read-preamble", "read-trace",
    ];

    private readonly Instrument _instrument;
    private readonly SessionOptions _options;
    private readonly ByteOrder _order;
    private IReadOnlyList<ScopeSetting> _standing = [];
    private int _standingSince;
    private ScopeSettings? _settings;

    private ScpiScope(Instrument instrument, SessionOptions options)
    {
        _instrument = instrument;
        _options = options;
        _order = Mnemonic.Matches("SWAPped", ScopeSetting.Parameter(instrument.Command("set-byte-order")))
            ? ByteOrder.Swapped
            : ByteOrder.Normal;
    }

    /// <inheritdoc/>
    public InstrumentIdentity Identity => _instrument.Session.Identity;

    /// <inheritdoc/>
    public bool CanDegauss => _instrument.Has(DegaussOperation);

    /// <summary>Connects; nothing is set.</summary>
    /// <exception cref="InstrumentException">Another instrument than the dialect is for, no scope, or a dialect that
    /// asks for
    /// other codes than 16 bit with sign.</exception>
    /// <exception cref="LinkException">Not reachable, or no SCPI.</exception>
    public static async Task<ScpiScope> Connect(InstrumentConnection connection, CancellationToken cancel)
    {
        var instrument = await Instrument.Connect("scope", Operations, "read-points", connection, cancel);
        if (!ScopeSetting.Same("INTeger,16", ScopeSetting.Parameter(instrument.Command("set-format"))))
        {
            instrument.Dispose();
            throw instrument.Refusal(
                $"dialect {connection.Dialect.Name} asks for another format than INTeger,16; only that is read");
        }

        return new ScpiScope(instrument, connection.Options);
    }

    /// <inheritdoc/>
    /// <remarks>Where anything had to be sent, everything is asked back: one setting may move another.</remarks>
    public async Task Configure(ScopeSettings settings, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(settings);
        var wanted = ScopeSetup.Wanted(_instrument, settings);
        var stands = _standingSince == _instrument.Session.Connections ? Commands(_standing) : [];
        var missing = wanted.Where(w => !stands.Contains(w.Command)).ToArray();
        if (missing.Length > 0)
        {
            await CheckSettings(cancel);
        }

        if (stands.Count == 0)
        {
            // A run that was killed may have left it armed: no acquisition but our own is to be triggered by our trains.
            await Abort(cancel);
        }

        (_settings, _standing) = (null, []);
        _standingSince = _instrument.Session.Connections;
        foreach (var setting in missing)
        {
            await _instrument.Session.Set(setting.Command, cancel);
        }

        foreach (var setting in missing.Length > 0 ? wanted : [])
        {
            await AskBack(setting, cancel);
        }

        _standing = wanted;
        _settings = settings;
    }

    /// <inheritdoc/>
    public async Task CheckSettings(CancellationToken cancel)
    {
        foreach (var setting in _standing)
        {
            if (await Differs(setting, cancel) is { } found)
            {
                // It does not stand any more: whoever comes next has everything sent anew.
                _standing = [];
                throw _instrument.Changed($"'{setting.Command}'", Printable.Text(found), "that");
            }
        }
    }

    /// <inheritdoc/>
    public async Task Arm(CancellationToken cancel)
    {
        await AskAttenuations(cancel);
        await _instrument.Session.Set(_instrument.Command("arm"), cancel);
        var waits = await _instrument.WaitFor(
            c => _instrument.ReadBit("read-condition", WaitsForTrigger, c), _options.ReplyWithin, Pause, cancel);
        if (!waits)
        {
            throw _instrument.Refusal("does not wait for its trigger though it was armed");
        }
    }

    /// <inheritdoc/>
    public Task Trigger(CancellationToken cancel) =>
        _instrument.Session.Set(_instrument.Command("trigger"), cancel);

    /// <inheritdoc/>
    public async Task<AcquisitionEnd> WaitForRecord(TimeSpan deadline, CancellationToken cancel)
    {
        const long Busy = (1L << Sweeping) | (1L << WaitsForTrigger);
        long condition = Busy;
        var done = await _instrument.WaitFor(
            async c => ((condition = await _instrument.ReadInteger("read-condition", c)) & Busy) == 0, deadline, Pause,
            cancel);
        if (done)
        {
            return AcquisitionEnd.Complete;
        }

        await Abort(cancel);
        return (condition & (1L << WaitsForTrigger)) != 0 ? AcquisitionEnd.NotTriggered : AcquisitionEnd.NotCompleted;
    }

    /// <inheritdoc/>
    public async Task<long> ReadCount(CancellationToken cancel) => await _instrument.ReadInteger("read-count", cancel);

    /// <inheritdoc/>
    /// <exception cref="InvalidOperationException">Not configured: a caller's mistake.</exception>
    /// <remarks>A trace that was cut, is of another length or scale than asked for, or of another acquisition is left
    /// out and reported, never patched.</remarks>
    /// <exception cref="LinkException">The count could not be read.</exception>
    public async Task<ScopeRecord> Read(CancellationToken cancel)
    {
        var settings = _settings ?? throw new InvalidOperationException("configure before reading");
        var traces = new List<RawTrace>(settings.Channels.Count);
        var connections = _instrument.Session.Connections;
        var preambles = await TryReadPreambles(settings, cancel);
        var before = preambles is { Count: > 0 } ? Agreed(preambles) : await ReadCount(cancel);
        for (var i = 0; i < settings.Channels.Count; i++)
        {
            if (await TryReadTrace(settings, settings.Channels[i], preambles?[i], before, cancel) is { } trace)
            {
                traces.Add(trace);
            }
        }

        var after = await ReadCount(cancel);
        var stood = after == before && connections == _instrument.Session.Connections;
        return new ScopeRecord(traces, stood ? after : null);
    }

    /// <inheritdoc/>
    public async Task Abort(CancellationToken cancel) =>
        await _instrument.Session.SetDown([_instrument.Command("abort")], cancel);

    /// <inheritdoc/>
    public Task Degauss(int input, CancellationToken cancel) => CanDegauss
        ? _instrument.Session.Set(_instrument.Command(DegaussOperation, channel: input), cancel)
        : throw new InvalidOperationException("the scope's dialect cannot degauss");

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _instrument.Dispose();

    /// <summary>The preambles of all channels, asked in one message: what a capture costs is its round trips.</summary>
    /// <returns>One a channel, in their order; null: they are asked one by one, since the dialect does not say that the
    /// instrument takes several units in one message, or what came was not one a channel.</returns>
    private async Task<IReadOnlyList<ScopePreamble>?> TryReadPreambles(
        ScopeSettings settings, CancellationToken cancel)
    {
        if (!_instrument.Has(PreamblesOperation))
        {
            return null;
        }

        var inputs = settings.Channels.Select(c => _instrument.Command(PreamblesOperation, channel: c.Input));
        var query = string.Join(";:", inputs);
        var count = settings.Channels.Count;
        try
        {
            return query.Length >= ProgramMessage.Longest ? null : await _instrument.Session.Ask(
                query,
                reply => ReplyList.Units(reply, count)
                    .Select(unit => ScopePreamble.Parse(Encoding.ASCII.GetBytes(unit))).ToArray(),
                cancel);
        }
        catch (LinkException e)
        {
            _instrument.Report(InstrumentEventKind.Discarded, $"preambles in one message: {e.Message}");
            return null;
        }
    }

    /// <summary>The acquisition that most preambles name, the newest of those equally often named: one that is stale must
    /// not make the others look so.</summary>
    private static long Agreed(IReadOnlyList<ScopePreamble> preambles) => preambles
        .GroupBy(preamble => preamble.Count)
        .MaxBy(same => (same.Count(), same.Key))!.Key;

    private async Task<RawTrace?> TryReadTrace(
        ScopeSettings settings, ScopeChannelSettings channel, ScopePreamble? known, long count,
        CancellationToken cancel)
    {
        try
        {
            var preamble = known ?? await _instrument.Session.Ask(
                _instrument.Command("read-preamble", channel: channel.Input), ScopePreamble.Parse, cancel);
            if (preamble.Doubt(settings, channel, count) is { } doubt)
            {
                _instrument.Report(InstrumentEventKind.Discarded, $"trace of {channel.Channel}: {doubt}");
                return null;
            }

            var order = _order;
            var codes = await _instrument.Session.AskBlock(
                _instrument.Command("read-trace", channel: channel.Input),
                settings.Points * sizeof(short),
                block => ReplyArray.Codes(block, order),
                cancel);
            if (codes.Length == settings.Points)
            {
                return preamble.Trace(channel.Channel, codes);
            }

            _instrument.Report(
                InstrumentEventKind.Discarded, $"trace of {channel.Channel}: {codes.Length} samples came where "
                    + $"{settings.Points} are due");
        }
        catch (LinkException e)
        {
            _instrument.Report(InstrumentEventKind.Discarded, $"trace of {channel.Channel}: {e.Message}");
        }

        return null;
    }

    private static HashSet<string> Commands(IEnumerable<ScopeSetting> settings) =>
        [.. settings.Select(setting => setting.Command)];

    private async Task AskBack(ScopeSetting setting, CancellationToken cancel)
    {
        if (await Differs(setting, cancel) is { } found)
        {
            throw _instrument.Refusal(
                $"'{setting.Command}' was taken as {Printable.Text(found)}; check its range and who else controls it");
        }
    }

    /// <summary>Nobody but this program may change what a probe is taken for: a wrong attenuation gives wrong volts
    /// that look right.</summary>
    private async Task AskAttenuations(CancellationToken cancel)
    {
        foreach (var channel in _settings?.Channels ?? [])
        {
            if (ScopeSetup.Attenuation(_instrument, channel) is { } setting
                && await Differs(setting, cancel) is { } found)
            {
                // It does not stand any more: whoever comes next has everything sent anew.
                _standing = [];
                throw new SettingChangedException(_instrument.Role, FormattableString.Invariant(
                    $"the attenuation of {channel.Channel.Name()} (input {channel.Input}) is {Printable.Text(found)} ")
                    + FormattableString.Invariant($"where {channel.Attenuation} was set; check the probe's switch and ")
                    + $"who else controls the scope ({_instrument.Session.Link})");
            }
        }
    }

    private async Task<string?> Differs(ScopeSetting setting, CancellationToken cancel) =>
        setting.Query is { } query ? await _instrument.Session.Ask(query, setting.Difference, cancel) : null;
}
