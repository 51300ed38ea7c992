namespace FakeBench.Scpi;

/// <summary>All commands of an instrument, found by header.</summary>
public sealed class CommandTree
{
    private readonly List<Command> _commands = [];

    /// <summary>Adds a command without parameters.</summary>
    public void Event(string pattern, Action<Call> run) => Add(pattern, 0, 0, (call, _) => run(call));

    /// <summary>Adds a command with one parameter.</summary>
    public void Set(string pattern, Action<Call> run) => Add(pattern, 1, 1, (call, _) => run(call));

    /// <summary>Adds a query without parameters.</summary>
    public void Ask(string pattern, Func<Call, string> answer) =>
        Add(pattern, 0, 0, (call, reply) => reply.Say(answer(call)));

    /// <summary>Adds a numeric setting: the command, and the query, which may ask for MINimum, MAXimum or
    /// DEFault.</summary>
    public void Number(string pattern, NumericRange range, Action<Call, double> set, Func<Call, double> get)
    {
        Add(pattern, 1, 1, (call, _) => set(call, range.Read(call.Data[0])));
        Add(pattern + "?", 0, 1, (call, reply) => reply.Say(Numbers.Nr3(Asked(call, range, get(call)))));
    }

    /// <summary>Adds a setting that is an integer, with its query (as <see cref="Number"/>).</summary>
    public void WholeNumber(string pattern, NumericRange range, Action<int> set, Func<int> get)
    {
        Add(pattern, 1, 1, (call, _) => set(range.ReadInteger(call.Data[0])));
        Add(pattern + "?", 0, 1, (call, reply) => reply.Say(Numbers.Nr1((long)Asked(call, range, get()))));
    }

    /// <summary>Adds a setting that is on or off, with its query.</summary>
    public void Switch(string pattern, Action<bool> set, Func<bool> get)
    {
        Add(pattern, 1, 1, (call, _) => set(call.Boolean()));
        Add(pattern + "?", 0, 0, (_, reply) => reply.Say(Numbers.Boolean(get())));
    }

    /// <summary>Adds any command.</summary>
    public void Add(string pattern, int fewest, int most, Action<Call, Reply> run) =>
        _commands.Add(new Command(new HeaderPattern(pattern), fewest, most, run));

    /// <summary>Finds the command of a header and checks the number of its parameters.</summary>
    /// <exception cref="ScpiException">−113 or −114 for the header, −108 or −109 for the number of
    /// parameters.</exception>
    public (Command Command, Call Call) Find(ProgramUnit unit)
    {
        ArgumentNullException.ThrowIfNull(unit);
        HeaderMatch best = HeaderMatch.None;
        foreach (Command command in _commands)
        {
            HeaderMatch match = command.Pattern.Match(unit.Header, out IReadOnlyList<int> suffixes);
            if (match == HeaderMatch.Match)
            {
                return unit.Data.Count < command.Fewest ? throw new ScpiException(-109, unit.Header)
                    : unit.Data.Count > command.Most ? throw new ScpiException(-108, unit.Header)
                    : (command, new Call(suffixes, unit.Data));
            }

            best = match > best ? match : best;
        }

        throw new ScpiException(best == HeaderMatch.SuffixOutOfRange ? -114 : -113, unit.Header);
    }

    // A query may ask for a bound: MINimum, MAXimum, DEFault.
    private static double Asked(Call call, NumericRange range, double value) =>
        call.Data.Count == 0 ? value
        : call.Data[0].Kind == DataKind.Word ? range.Read(call.Data[0])
        : throw new ScpiException(-104, call.Data[0].Text);
}
