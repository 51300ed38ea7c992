using System.Globalization;
using System.Text.RegularExpressions;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Instruments.Roles;

/// <summary>What all roles share: operations by the dialect's commands, set and read back, one wording of
/// refusals.</summary>
internal sealed class Instrument : IDisposable
{
    private readonly Dialect _dialect;
    private readonly IInstrumentLog _log;

    private Instrument(string role, Dialect dialect, ScpiSession session, TimeProvider time, IInstrumentLog log)
    {
        Role = role;
        _dialect = dialect;
        Session = session;
        Time = time;
        _log = log;
    }

    public string Role { get; }

    public ScpiSession Session { get; }

    public TimeProvider Time { get; }

    /// <summary>Connects, and refuses an instrument of another identity or kind.</summary>
    /// <param name="role">The role.</param>
    /// <param name="operations">The operations that the dialect must have.</param>
    /// <param name="characteristic">The question that only an instrument of this role answers.</param>
    /// <param name="connection">Where and how.</param>
    /// <param name="cancel">Ends the attempt.</param>
    public static async Task<Instrument> Connect(
        string role, string[] operations, string characteristic, InstrumentConnection connection,
        CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(connection);
        var dialect = connection.Dialect;
        if (operations.Where(o => !dialect.Commands.ContainsKey(o)).ToArray() is { Length: > 0 } missing)
        {
            throw new InstrumentException(
                role, $"dialect {dialect.Name} has no command for {string.Join(", ", missing)}; add it or name another "
                    + $"dialect");
        }

        var session = await ScpiSession.Open(role, connection, cancel);
        try
        {
            var instrument = new Instrument(role, dialect, session, connection.Time, connection.Log);
            instrument.CheckIdentity();
            await instrument.CheckKind(characteristic, cancel);
            return instrument;
        }
        catch
        {
            session.Dispose();
            throw;
        }
    }

    /// <summary>Whether the dialect has a command for an operation that not every instrument of the role
    /// knows.</summary>
    public bool Has(string operation) => _dialect.Commands.ContainsKey(operation);

    /// <summary>The command of an operation.</summary>
    public string Command(string operation, double? value = null, int? channel = null)
    {
        var command = _dialect.Commands[operation];
        if (value is { } number)
        {
            command = command.Replace(
                "{value}", number.ToString("R", CultureInfo.InvariantCulture), StringComparison.Ordinal);
        }

        return channel is { } input
            ? command.Replace("{channel}", input.ToString(CultureInfo.InvariantCulture), StringComparison.Ordinal)
            : command;
    }

    /// <summary>Asks for a number that is a measurement or a setting: an overload or a not-a-number is
    /// refused.</summary>
    public async Task<double> ReadNumber(string operation, CancellationToken cancel, int? channel = null)
    {
        var command = Command(operation, channel: channel);
        return Finite(command, await Session.Ask(command, ReplyNumber.Parse, cancel));
    }

    /// <summary>Asks for a measurement that safety rests on: never an earlier reply, nor one of an instrument that was
    /// switched off and on.</summary>
    public async Task<double> ReadSurely(string operation, CancellationToken cancel)
    {
        var command = Command(operation);
        return Finite(command, await Session.AskSurely(command, ReplyNumber.Parse, cancel));
    }

    public async Task<bool> ReadBoolean(string operation, CancellationToken cancel) =>
        await Session.Ask(Command(operation), ReplyWord.ParseBoolean, cancel);

    /// <summary>Asks whether the output is on, once.</summary>
    public async Task<bool> ReadOutputOnce(CancellationToken cancel) =>
        await Session.AskOnce(Command("read-output"), ReplyWord.ParseBoolean, cancel);

    public async Task<long> ReadInteger(string operation, CancellationToken cancel) =>
        await Session.Ask(Command(operation), ReplyInteger.Parse, cancel);

    /// <summary>Reads a bit of a condition register.</summary>
    public async Task<bool> ReadBit(string operation, int bit, CancellationToken cancel) =>
        (await ReadInteger(operation, cancel) & (1L << bit)) != 0;

    /// <summary>Sets a value under a permit, and reads it back.</summary>
    /// <returns>The value as read back.</returns>
    public async Task<double> SetGuarded(
        Permit permit, string operation, string readBack, double value, double tolerance, CancellationToken cancel)
    {
        await Session.Energise(permit, Command(operation, value), cancel);
        return await CheckReadBack(operation, readBack, value, tolerance, cancel);
    }

    /// <summary>Reads a setting and holds it against what was set.</summary>
    public async Task<double> CheckReadBack(
        string operation, string readBack, double value, double tolerance, CancellationToken cancel,
        int? channel = null)
    {
        var found = await ReadNumber(readBack, cancel, channel);
        return Math.Abs(found - value) <= tolerance
            ? found
            : throw Refusal(FormattableString.Invariant(
                $"{operation} {value:R} was taken as {found:R}; check its range and who else controls it"));
    }

    /// <summary>Holds a setting that was made earlier against what stands now.</summary>
    /// <exception cref="SettingChangedException">It is another one.</exception>
    public async Task CheckStanding(
        string setting, string readBack, double set, double tolerance, string unit, CancellationToken cancel)
    {
        var found = await ReadNumber(readBack, cancel);
        if (!(Math.Abs(found - set) <= tolerance))
        {
            throw Changed(setting, FormattableString.Invariant($"{found:G6} {unit}"), FormattableString.Invariant(
                $"{set:G6} {unit}"));
        }
    }

    /// <summary>What to throw for a setting that somebody else changed.</summary>
    public SettingChangedException Changed(string setting, string found, string set) => new(
        Role, $"{setting} is {found} where {set} was set; somebody else controls the instrument, or it was switched off "
            + $"and on: find out who, nothing is put right here ({Session.Link})");

    /// <summary>Waits until a register shows what is wanted.</summary>
    /// <returns>Whether it did before the deadline.</returns>
    public async Task<bool> WaitFor(
        Func<CancellationToken, Task<bool>> shown, TimeSpan within, TimeSpan pause, CancellationToken cancel)
    {
        var began = Time.GetTimestamp();
        while (!await shown(cancel))
        {
            if (Time.GetElapsedTime(began) >= within)
            {
                return false;
            }

            await Task.Delay(pause, Time, cancel);
        }

        return true;
    }

    public InstrumentException Refusal(string message) => new(Role, $"{message} ({Session.Link})");

    public void Report(InstrumentEventKind kind, string message) =>
        _log.Report(new InstrumentEvent(Role, Session.Link, kind, Printable.Text(message)));

    public void Dispose() => Session.Dispose();

    private double Finite(string command, double number) => double.IsFinite(number)
        ? number
        : throw Refusal($"answers {command} with {(double.IsNaN(number) ? "no number" : "an overload")}");

    private void CheckIdentity()
    {
        var text = Session.Identity.Text;
        if (_dialect.Identity is { } pattern
            && !Regex.IsMatch(text, pattern, RegexOptions.NonBacktracking | RegexOptions.CultureInvariant))
        {
            throw Refusal($"'{text}' is not the instrument that dialect {_dialect.Name} is for ({pattern}); check link "
                + $"and dialect");
        }
    }

    private async Task CheckKind(string characteristic, CancellationToken cancel)
    {
        var (answer, error) = await Session.Probe(Command(characteristic, channel: 1), cancel);
        if (answer is null)
        {
            throw Refusal(
                $"'{Session.Identity.Text}' is no {Role}: it refuses {Command(characteristic)} with {error.Number}; "
                + "check which link belongs to which role, and the dialect");
        }
    }
}
