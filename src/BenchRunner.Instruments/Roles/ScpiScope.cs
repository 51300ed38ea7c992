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

    // Contract of IScope.Configure and the bound within which a preamble must agree with what was set.
    private const double Tolerance = 0.01;

    private static readonly TimeSpan Pause = TimeSpan.FromMilliseconds(1);

    private static readonly string[] Operations =
    [
        "set-range", "read-range", "set-offset", "read-offset", "set-interval", "read-interval", "set-points",
        "read-points",
        "set-pretrigger", "read-pretrigger", "set-trigger-source", "read-trigger-source", "set-trigger-level",
        "read-trigger-level", "set-trigger-slope", "set-format", "read-format", "set-byte-order", "read-byte-order",
        "arm", "abort", "read-condition", "read-count", "read-preamble", "read-trace",
    ];

    private readonly Instrument _instrument;
    private readonly SessionOptions _options;
    private readonly ByteOrder _order;
    private HashSet<string> _standing = [];
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
        var wanted = Wanted(settings);
        var standing = _standingSince == _instrument.Session.Connections ? _standing : [];
        (_settings, _standing) = (null, []);
        _standingSince = _instrument.Session.Connections;
        var missing = wanted.Where(w => !standing.Contains(w.Command)).ToArray();
        foreach (var setting in missing)
        {
            await _instrument.Session.Set(setting.Command, cancel);
        }

        foreach (var setting in missing.Length > 0 ? wanted : [])
        {
            await AskBack(setting, cancel);
        }

        _standing = [.. wanted.Select(w => w.Command)];
        _settings = settings;
    }

    /// <inheritdoc/>
    public async Task Arm(CancellationToken cancel)
    {
        await _instrument.Session.Set(_instrument.Command("arm"), cancel);
        var waits = await _instrument.WaitFor(
            c => _instrument.ReadBit("read-condition", WaitsForTrigger, c), _options.ReplyWithin, Pause, cancel);
        if (!waits)
        {
            throw _instrument.Refusal("does not wait for its trigger though it was armed");
        }
    }

    /// <inheritdoc/>
    public async Task<bool> WaitForRecord(TimeSpan deadline, CancellationToken cancel)
    {
        const long Busy = (1L << Sweeping) | (1L << WaitsForTrigger);
        var done = await _instrument.WaitFor(
            async c => (await _instrument.ReadInteger("read-condition", c) & Busy) == 0, deadline, Pause, cancel);
        if (!done)
        {
            await Abort(cancel);
        }

        return done;
    }

    /// <inheritdoc/>
    public async Task<long> ReadCount(CancellationToken cancel) => await _instrument.ReadInteger("read-count", cancel);

    /// <inheritdoc/>
    /// <exception cref="InvalidOperationException">Not configured: a caller's mistake.</exception>
    /// <remarks>A trace that was cut, is of another length or scale than asked for, or of another acquisition is left
    /// out
    /// and reported, never patched.</remarks>
    /// <exception cref="LinkException">The count could not be read.</exception>
    public async Task<ScopeRecord> Read(CancellationToken cancel)
    {
        var settings = _settings ?? throw new InvalidOperationException("configure before reading");
        var before = await ReadCount(cancel);
        var traces = new List<RawTrace>(settings.Channels.Count);
        var connections = _instrument.Session.Connections;
        foreach (var channel in settings.Channels)
        {
            if (await TryReadTrace(settings, channel, before, cancel) is { } trace)
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

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _instrument.Dispose();

    private async Task<RawTrace?> TryReadTrace(
        ScopeSettings settings, ScopeChannelSettings channel, long count, CancellationToken cancel)
    {
        try
        {
            var preamble = await _instrument.Session.Ask(
                _instrument.Command("read-preamble", channel: channel.Input), ScopePreamble.Parse, cancel);
            if (Doubt(settings, channel, preamble, count) is { } doubt)
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

    private List<ScopeSetting> Wanted(ScopeSettings settings)
    {
        var trigger = settings.Channels.FirstOrDefault(c => c.Channel == settings.TriggerOn)
            ?? throw new ArgumentException("the trigger's channel is not recorded", nameof(settings));
        var (interval, pretrigger) = (settings.Interval.Value, settings.Pretrigger.Value);
        List<ScopeSetting> wanted =
        [
            Words("set-format", "read-format"),
            Words("set-byte-order", "read-byte-order"),
            Number("set-interval", "read-interval", interval, interval * Tolerance),
            Number("set-points", "read-points", settings.Points, 0),
            Number("set-pretrigger", "read-pretrigger", pretrigger, (pretrigger * Tolerance) + interval),
        ];
        foreach (var c in settings.Channels)
        {
            wanted.Add(Number("set-range", "read-range", c.Span, c.Span * Tolerance, c.Input));
            wanted.Add(Number("set-offset", "read-offset", c.Offset, c.Span * Tolerance, c.Input));
        }

        wanted.Add(Words("set-trigger-source", "read-trigger-source", trigger.Input));
        wanted.Add(Number("set-trigger-level", "read-trigger-level", settings.TriggerLevel, trigger.Span * Tolerance));
        wanted.Add(Words("set-trigger-slope", null));
        return wanted;
    }

    private ScopeSetting Number(string set, string read, double value, double tolerance, int? channel = null) =>
        ScopeSetting.Number(
            _instrument.Command(set, value, channel), _instrument.Command(read, channel: channel), value, tolerance);

    private ScopeSetting Words(string set, string? read, int? channel = null) =>
        ScopeSetting.Words(_instrument.Command(set, channel: channel), read is null ? null : _instrument.Command(read));

    private async Task AskBack(ScopeSetting setting, CancellationToken cancel)
    {
        if (setting.Query is { } query && await _instrument.Session.Ask(query, setting.Difference, cancel) is { } found)
        {
            throw _instrument.Refusal(
                $"'{setting.Command}' was taken as {Printable.Text(found)}; check its range and who else controls it");
        }
    }

    private static string? Doubt(
        ScopeSettings settings, ScopeChannelSettings channel, ScopePreamble preamble, long count)
    {
        var interval = settings.Interval.Value;
        if (preamble.Count != count)
        {
            return FormattableString.Invariant($"of acquisition {preamble.Count}, not {count}");
        }

        if (preamble.Points != settings.Points)
        {
            return FormattableString.Invariant($"{preamble.Points} samples where {settings.Points} are due");
        }

        if (!(Math.Abs(preamble.XIncrement - interval) <= interval * Tolerance))
        {
            return FormattableString.Invariant($"sample interval {preamble.XIncrement} s where {interval} s was set");
        }

        return Math.Abs(preamble.Span - channel.Span) <= channel.Span * Tolerance
            ? null
            : FormattableString.Invariant($"range {preamble.Span} where {channel.Span} was set");
    }
}
