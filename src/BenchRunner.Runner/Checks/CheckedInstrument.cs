using System.Globalization;
using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Runner.Checks;

/// <summary>One instrument while it is checked: only questions are asked, nothing is set.</summary>
/// <param name="role">The role.</param>
/// <param name="setup">What the bench file says of it.</param>
/// <param name="address">Where it is.</param>
/// <param name="dialect">What it understands.</param>
/// <param name="key">Name of the lock that a run would take, where its link has locks.</param>
/// <param name="time">The clock.</param>
internal sealed class CheckedInstrument(
    string role, InstrumentSetup setup, LinkAddress address, Dialect dialect, string key, TimeProvider time)
{
    private const int LatencyQuestions = 20;

    private readonly List<CheckFinding> _findings = [];
    private readonly Dictionary<string, string> _settings = [];
    private readonly Noted _noted = new();
    private InstrumentCheck _check = new(role, address.ToString());

    /// <summary>The role.</summary>
    public string Role => role;

    /// <summary>What was found so far.</summary>
    public InstrumentCheck Check => _check with
    {
        Errors = [.. _noted.Errors],
        Settings = _settings,
        Findings = [.. _findings],
    };

    /// <summary>Whether the instrument was reached.</summary>
    public ScpiSession? Session { get; private set; }

    /// <summary>Connects and identifies.</summary>
    public async Task Open(CancellationToken cancel)
    {
        try
        {
            Session = await ScpiSession.Open(
                role, address, new SessionOptions { Habits = dialect.Wire, Lock = key }, time, _noted, cancel);
        }
        catch (LinkException e)
        {
            Unfit(e.Message);
            return;
        }

        string text = Session.Identity.Text;
        _check = _check with { Identity = text };
        foreach (string? pattern in (string?[])[setup.Identity, dialect.Identity])
        {
            if (pattern is not null && !Regex.IsMatch(text, $@"\A(?:{pattern})\z", RegexOptions.NonBacktracking))
            {
                Unfit($"'{text}' does not match the identity {pattern}; check link and bench file");
            }
        }

        if (_noted.Errors.Count > 0)
        {
            Note($"its error queue held {_noted.Errors.Count} entries, left by an earlier user; they were cleared");
        }
    }

    /// <summary>The same instrument over the same session, to read its settings once more.</summary>
    public CheckedInstrument Reading() => new(role, setup, address, dialect, key, time) { Session = Session };

    /// <summary>Notes what makes the bench unfit.</summary>
    public void Unfit(string message) => _findings.Add(new CheckFinding(true, message));

    /// <summary>Notes what is worth knowing.</summary>
    public void Note(string message) => _findings.Add(new CheckFinding(false, message));

    /// <summary>Asks for a number and shows it.</summary>
    /// <returns>The number; null where the dialect has no such operation.</returns>
    public async Task<double?> Number(string operation, string unit, CancellationToken cancel, int? channel = null)
    {
        if (!dialect.Commands.TryGetValue(operation, out string? command))
        {
            return null;
        }

        string input = channel?.ToString(CultureInfo.InvariantCulture) ?? "";
        double number = await Session!.Ask(
            command.Replace("{channel}", input, StringComparison.Ordinal), ReplyNumber.Parse, cancel);
        string name = operation.Replace("read-", "", StringComparison.Ordinal) + (channel is null ? "" : $" {input}");
        _settings[name] = string.Create(CultureInfo.InvariantCulture, $"{number:G6}{(unit.Length > 0 ? " " + unit : "")}");
        return number;
    }

    /// <summary>Asks for a yes or no and shows it.</summary>
    public async Task<bool> Flag(string operation, CancellationToken cancel)
    {
        bool flag = await Session!.Ask(dialect.Commands[operation], ReplyWord.ParseBoolean, cancel);
        _settings[operation.Replace("read-", "", StringComparison.Ordinal)] = flag ? "on" : "off";
        return flag;
    }

    /// <summary>Asks for a list of flags and shows it.</summary>
    public async Task<bool[]> Flags(string operation, CancellationToken cancel)
    {
        string[] words = await Session!.Ask(
            dialect.Commands[operation], reply => ReplyList.Elements(reply).ToArray(), cancel);
        _settings[operation.Replace("read-", "", StringComparison.Ordinal)] =
            string.Join(',', words.Select(word => Printable.Text(word)));
        return [.. words.Select(word => word.Trim() == "1")];
    }

    /// <summary>The self-test, where the dialect has one.</summary>
    public async Task SelfTest(CancellationToken cancel)
    {
        if (dialect.Commands.TryGetValue("self-test", out string? command))
        {
            long result = await Session!.Ask(command, ReplyInteger.Parse, cancel);
            _check = _check with { SelfTest = result };
            if (result != 0)
            {
                Unfit($"its self-test says {result} where 0 is passed; see its manual and have it repaired");
            }
        }
    }

    /// <summary>Whether the front panel is locked, and whether somebody used it since the event register was
    /// read.</summary>
    public async Task Panel(CancellationToken cancel)
    {
        if (!dialect.Commands.TryGetValue("read-lock", out string? command))
        {
            _settings["front-panel"] = "not known: the dialect has no read-lock";
        }
        else if (!await Session!.Ask(command, ReplyWord.ParseBoolean, cancel))
        {
            _settings["front-panel"] = "free";
            Note("its front panel is not locked: anybody can change a setting during a run");
        }
        else
        {
            _settings["front-panel"] = "locked";
        }
    }

    /// <summary>Times a question that changes nothing.</summary>
    public async Task Latency(CancellationToken cancel)
    {
        var took = new double[LatencyQuestions];
        for (int i = 0; i < took.Length; i++)
        {
            long began = time.GetTimestamp();
            await Session!.Ask("*IDN?", ReplyIdentity.Parse, cancel);
            took[i] = time.GetElapsedTime(began).TotalSeconds;
        }

        Array.Sort(took);
        double median = (took[(LatencyQuestions / 2) - 1] + took[LatencyQuestions / 2]) / 2;
        _check = _check with { LatencyMedian = median, LatencyMost = took[^1] };
    }

    private sealed class Noted : IInstrumentLog
    {
        public List<string> Errors { get; } = [];

        public void Report(InstrumentEvent what)
        {
            if (what.Kind == InstrumentEventKind.Errors)
            {
                Errors.Add(what.Message.Replace("the error queue held ", "", StringComparison.Ordinal)
                    .Replace(" at the start", "", StringComparison.Ordinal));
            }
        }
    }
}
