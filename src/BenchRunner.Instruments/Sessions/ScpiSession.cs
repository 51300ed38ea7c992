using System.Runtime.CompilerServices;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Roles;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Talks with one instrument: one exchange at a time, each with one deadline, every setting checked in the
/// error queue.</summary>
/// <remarks>
/// Questions and setting down are repeated when a reply is lost, over a new connection if need be. What sets is never
/// repeated, and what energises or fires is neither repeated nor sent over any connection but the first, the one that
/// was identified. Thread-safe: callers take turns; <see cref="SendNow"/> alone does not wait for its turn.
/// </remarks>
public sealed class ScpiSession : IDisposable
{
    private readonly Turn _turn = new();
    private readonly string _role;
    private readonly WireKeeper _wires;
    private readonly bool _numbered;
    private readonly Repetition _reading;
    private readonly SettingDown _settingDown;

    private ScpiSession(string role, WireKeeper wires, SessionOptions options, TimeProvider time)
    {
        _role = role;
        _wires = wires;
        _numbered = options.Habits.Numbered;
        _reading = Repetition.Of(options.ReadAttempts, TimeSpan.Zero, time);
        _settingDown = new SettingDown(_turn, wires, Repetition.Of(options.SetDownAttempts, TimeSpan.Zero, time));
    }

    /// <summary>What the instrument said it is.</summary>
    public InstrumentIdentity Identity => _wires.Identity;

    /// <summary>The link as the bench file names it.</summary>
    public string Link => _wires.Link;

    /// <summary>How often the link was opened; a change says that the instrument's settings are not known any
    /// more.</summary>
    public int Connections => _wires.Connections;

    /// <summary>Connects, asks <c>*IDN?</c>, logs what the error queue holds and clears it (<c>*CLS</c>).</summary>
    /// <param name="role">The role, for messages.</param>
    /// <param name="address">Where the instrument is.</param>
    /// <param name="options">Bounds of the session.</param>
    /// <param name="time">The clock of all deadlines.</param>
    /// <param name="log">Takes what happens on the way.</param>
    /// <param name="cancel">Ends the attempt.</param>
    /// <exception cref="LinkException">Not reachable, or what answers is no SCPI instrument.</exception>
    public static Task<ScpiSession> Open(
        string role,
        LinkAddress address,
        SessionOptions options,
        TimeProvider time,
        IInstrumentLog log,
        CancellationToken cancel) => Open(role, address, options, time, log, InstrumentConnection.Wire, cancel);

    /// <summary>Connects as a role's connection says.</summary>
    internal static Task<ScpiSession> Open(string role, InstrumentConnection to, CancellationToken cancel) =>
        Open(role, to.Address, to.Options with { Habits = to.Dialect.Wire }, to.Time, to.Log, to.Opener, cancel);

    /// <summary>Asks a question that may be asked again, and reads its reply, one line.</summary>
    /// <typeparam name="T">The answer.</typeparam>
    /// <param name="query">One program message.</param>
    /// <param name="parse">Reads the reply, e.g. <see cref="ReplyNumber.Parse"/>.</param>
    /// <param name="cancel">Ends the exchange; the next one begins with a resynchronisation.</param>
    /// <exception cref="LinkException">Late, cut, malformed or lost, as often as the options allow.</exception>
    public ValueTask<T> Ask<T>(string query, ReplyParser<T> parse, CancellationToken cancel) =>
        _reading.Run(
            static (state, cancel) => state.Session.AskOnce(state.Query, state.Parse, cancel),
            (Session: this, Query: query, Parse: parse),
            cancel);

    /// <summary>Asks a question that may be asked again, once.</summary>
    /// <inheritdoc cref="Ask" path="/typeparam"/>
    /// <inheritdoc cref="Ask" path="/param"/>
    /// <exception cref="LinkException">Late, cut, malformed or lost.</exception>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> AskOnce<T>(string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        await _turn.Take(cancel);
        try
        {
            return await (await _wires.Ready(cancel)).Ask(query, parse, cancel);
        }
        finally
        {
            _turn.Give();
        }
    }

    /// <summary>Asks what safety rests on. Where the dialect allows it, with a number that the reply must bring back, so
    /// that no earlier reply is taken for it, and with the power-on bit of the event register.</summary>
    /// <inheritdoc cref="Ask" path="/typeparam"/>
    /// <inheritdoc cref="Ask" path="/param"/>
    /// <inheritdoc cref="Ask" path="/exception"/>
    /// <exception cref="InstrumentException">The instrument was switched off and on: its settings are lost.</exception>
    public async ValueTask<T> AskSurely<T>(string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        if (!_numbered)
        {
            return await Ask(query, parse, cancel);
        }

        var (answer, switchedOn) = await _reading.Run(
            static (state, cancel) => state.Session.AskNumberedOnce(state.Query, state.Parse, cancel),
            (Session: this, Query: query, Parse: parse),
            cancel);
        return !switchedOn
            ? answer
            : throw new InstrumentException(
                _role, $"was switched off and on since it was connected, so its settings are lost; look at its mains "
                    + $"plug and begin anew ({Link})");
    }

    /// <summary>Asks for a block, once, received straight into a pooled buffer.</summary>
    /// <typeparam name="T">What is made of the block.</typeparam>
    /// <param name="query">One program message.</param>
    /// <param name="bound">The longest block that is due, bytes.</param>
    /// <param name="parse">Reads the block's bytes, which are gone when it returns.</param>
    /// <param name="cancel">Ends the exchange; inside a block that breaks the link.</param>
    /// <exception cref="LinkException">Late, cut, longer than due, malformed or lost. Never a part of a
    /// block.</exception>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> AskBlock<T>(string query, int bound, ReplyParser<T> parse, CancellationToken cancel)
    {
        await _turn.Take(cancel);
        try
        {
            return await (await _wires.Ready(cancel)).AskBlock(query, bound, parse, cancel);
        }
        finally
        {
            _turn.Give();
        }
    }

    /// <summary>Asks a question that an instrument of another kind refuses.</summary>
    /// <returns>The answer, or null where it was refused; and what the error queue then held.</returns>
    /// <exception cref="LinkException">Late, malformed or lost.</exception>
    public async Task<(string? Answer, ErrorEntry Error)> Probe(string query, CancellationToken cancel)
    {
        await _turn.Take(cancel);
        try
        {
            return await (await _wires.Ready(cancel)).Probe(query, cancel);
        }
        finally
        {
            _turn.Give();
        }
    }

    /// <summary>Sends one setting, once, and reads the error queue.</summary>
    /// <param name="command">One program message without a reply.</param>
    /// <param name="cancel">Ends the exchange; whether the setting was taken is then unknown.</param>
    /// <exception cref="InstrumentException">The error queue held something.</exception>
    /// <exception cref="LinkException">The link failed; whether the setting was taken is unknown.</exception>
    public Task Set(string command, CancellationToken cancel) => SetOnce(null, command, cancel);

    /// <summary>Sends one command that energises or fires, under the permit's lock, once, and reads the error
    /// queue.</summary>
    /// <inheritdoc cref="Set" path="/exception"/>
    /// <param name="permit">The leave to do so.</param>
    /// <param name="command">One program message without a reply.</param>
    /// <param name="cancel">Ends the exchange; whether the command was taken is then unknown.</param>
    /// <exception cref="PermitException">The permit is not live; nothing was written.</exception>
    public Task Energise(Permit permit, string command, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(permit);
        return SetOnce(permit, command, cancel);
    }

    /// <summary>Sends one command that sets down, at once, even while another exchange waits for its reply.</summary>
    /// <exception cref="LinkException">The link is lost: what the instrument does is unknown.</exception>
    public void SendNow(string command) => _wires.Current.SendDown(command);

    /// <summary>Sends commands that set down: at once, and again over a new connection where the link was
    /// lost.</summary>
    /// <returns>What the error queue held afterwards; the caller reads back what became of it.</returns>
    /// <exception cref="LinkException">The instrument was not reached, as often as the options allow: its state is
    /// unknown.</exception>
    public Task<IReadOnlyList<ErrorEntry>> SetDown(IReadOnlyList<string> commands, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(commands);
        return _settingDown.Send(commands, cancel);
    }

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _wires.Dispose();

    private static async Task<ScpiSession> Open(
        string role,
        LinkAddress address,
        SessionOptions options,
        TimeProvider time,
        IInstrumentLog log,
        LinkOpener opener,
        CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(address);
        ArgumentNullException.ThrowIfNull(options);
        ArgumentNullException.ThrowIfNull(time);
        ArgumentNullException.ThrowIfNull(log);
        ArgumentNullException.ThrowIfNull(opener);
        var wires = await WireKeeper.Open(role, address, options, time, log, opener, cancel);
        return new ScpiSession(role, wires, options, time);
    }

    private async ValueTask<(T Answer, bool SwitchedOn)> AskNumberedOnce<T>(
        string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        await _turn.Take(cancel);
        try
        {
            return await (await _wires.Ready(cancel)).AskNumbered(query, parse, cancel);
        }
        finally
        {
            _turn.Give();
        }
    }

    private async Task SetOnce(Permit? permit, string command, CancellationToken cancel)
    {
        await _turn.Take(cancel);
        try
        {
            var wire = await _wires.Ready(cancel);
            await wire.Ready(cancel);
            if (permit is null)
            {
                wire.Send(command);
            }
            else
            {
                OnlyFirstConnection();
                permit.Guard(() => wire.Send(command));
            }

            var errors = await wire.ReadErrors(cancel);
            if (errors.Count > 0)
            {
                throw new InstrumentException(_role, Complaint(command, errors));
            }
        }
        finally
        {
            _turn.Give();
        }
    }

    private void OnlyFirstConnection()
    {
        if (Connections > 1)
        {
            throw new LinkException(
                Link, "was opened again since the instrument was identified: its state is unknown, energising is "
                    + "refused");
        }
    }

    private static string Complaint(string command, IReadOnlyList<ErrorEntry> errors)
    {
        var lost = errors.Any(e => e.Number == ErrorEntry.QueueOverflow)
            ? "; entries were lost, so its settings are unknown" : "";
        return $"refused '{command}': {string.Join(", ", errors)}{lost}";
    }
}
