using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Safety;

namespace BenchRunner.Runner.Benches;

/// <summary>All instruments of a bench, connected and identified: those of the runner, and safety's own
/// connections.</summary>
/// <remarks>
/// Every connection that the safe state needs is opened before anything is energised, so that none has to be opened in
/// need. An instrument that admits one client, or one beside the guardian, is shared; its session lets one exchange at
/// a time through.
/// </remarks>
public sealed class OpenBench : IAsyncDisposable
{
    private readonly Stack<IDisposable> _open = new();

    private OpenBench()
    {
    }

    /// <summary>The supply.</summary>
    public ISupply Supply { get; private set; } = null!;

    /// <summary>The pulser.</summary>
    public IPulser Pulser { get; private set; } = null!;

    /// <summary>The scope.</summary>
    public IScope Scope { get; private set; } = null!;

    /// <summary>The hotplate; null where the bench has none.</summary>
    public IHotplate? Hotplate { get; private set; }

    /// <summary>The runner's own connection to the voltmeter.</summary>
    public IVoltmeter Voltmeter { get; private set; } = null!;

    /// <summary>Safety's connections; the interlock's is the only one.</summary>
    public SafetyRoles Safety { get; private set; } = null!;

    /// <summary>Role to what its instrument said it is.</summary>
    public IReadOnlyDictionary<string, InstrumentIdentity> Identities { get; private set; } = null!;

    /// <summary>Whether the instruments say of themselves that they are simulated.</summary>
    public bool IsSimulated { get; private set; }

    /// <summary>Connects every role of a bench.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="dialects">Name to dialect file.</param>
    /// <param name="links">Links that stand in for those of the bench file (a fake bench's); null: none do.</param>
    /// <param name="log">Takes what the links report.</param>
    /// <param name="opener">Opens the links.</param>
    /// <param name="time">The clock of all deadlines.</param>
    /// <param name="cancel">Ends the attempt.</param>
    /// <exception cref="InstrumentException">An instrument is of the wrong kind, or says that its hardware is
    /// broken.</exception>
    /// <exception cref="BenchException">An instrument cannot be reached, or real and simulated ones are
    /// mixed.</exception>
    public static async Task<OpenBench> Open(
        Bench bench,
        IReadOnlyDictionary<string, DialectFile> dialects,
        IReadOnlyDictionary<string, string>? links,
        IInstrumentLog log,
        LinkOpener opener,
        TimeProvider time,
        CancellationToken cancel)
    {
        var open = new OpenBench();
        try
        {
            var reached = new BenchLinks(bench, dialects, links, opener);
            await open.Connect((role, options) => reached.To(role, options, log, time), bench, cancel);
            open.Identify(bench);
            return open;
        }
        catch
        {
            await open.DisposeAsync();
            throw;
        }
    }

    /// <summary>Closes every link, in reverse order. Sends nothing: the safe state comes before.</summary>
    public ValueTask DisposeAsync()
    {
        while (_open.TryPop(out IDisposable? link))
        {
            link.Dispose();
        }

        return ValueTask.CompletedTask;
    }

    private async Task Connect(
        Func<string, SessionOptions, InstrumentConnection> at, Bench bench, CancellationToken cancel)
    {
        var patient = new SessionOptions { RefuseHardwareErrors = true };
        SessionOptions watching = SessionOptions.Watching with
        {
            ReplyWithin = TimeSpan.FromSeconds(bench.Safety.ReplyWithin),
            RefuseHardwareErrors = true,
        };

        // Of two connections the guardian has one: work and watch share the other.
        bool OwnToo(string role) => bench.Roles[role].Connections > 2;

        // Safety first: whatever fails later, these are there.
        ScpiInterlock interlock = await Reach(
            "interlock", ScpiInterlock.Connect(at("interlock", watching), cancel));
        ScpiVoltmeter watchMeter = await Reach(
            "voltmeter", ScpiVoltmeter.Connect(at("voltmeter", watching), cancel));
        ScpiSupply safeSupply = await Reach("supply", ScpiSupply.Connect(at("supply", patient), cancel));
        ScpiPulser safePulser = await Reach("pulser", ScpiPulser.Connect(at("pulser", patient), cancel));
        Hotplate = bench.Roles.ContainsKey("hotplate")
            ? await Reach("hotplate", ScpiHotplate.Connect(at("hotplate", patient), cancel)) : null;
        Safety = new SafetyRoles(
            safePulser, safeSupply, interlock, watchMeter, Hotplate,
            OwnToo("supply") ? safeSupply : null, OwnToo("pulser") ? safePulser : null);

        Voltmeter = OwnToo("voltmeter")
            ? await Reach("voltmeter", ScpiVoltmeter.Connect(at("voltmeter", patient), cancel)) : watchMeter;
        Supply = OwnToo("supply")
            ? await Reach("supply", ScpiSupply.Connect(at("supply", patient), cancel)) : safeSupply;
        Pulser = OwnToo("pulser")
            ? await Reach("pulser", ScpiPulser.Connect(at("pulser", patient), cancel)) : safePulser;
        Scope = await Reach("scope", ScpiScope.Connect(at("scope", patient), cancel));
    }

    private void Identify(Bench bench)
    {
        var identities = new Dictionary<string, InstrumentIdentity>
        {
            ["supply"] = Supply.Identity,
            ["pulser"] = Pulser.Identity,
            ["scope"] = Scope.Identity,
            ["voltmeter"] = Voltmeter.Identity,
            ["interlock"] = Safety.Interlock.Identity,
        };
        if (Hotplate is not null)
        {
            identities["hotplate"] = Hotplate.Identity;
        }

        Identities = identities;
        foreach ((string role, InstrumentIdentity identity) in Identities)
        {
            InstrumentSetup setup = bench.Roles[role];
            if (setup.Identity is { } pattern
                && !Regex.IsMatch(identity.Text, $@"\A(?:{pattern})\z", RegexOptions.NonBacktracking))
            {
                throw new BenchException(
                    $"{setup.Where}: the {role} says that it is '{identity.Text}', expected {pattern}; check which "
                        + $"link belongs to "
                        + "which role; nothing was energised");
            }
        }

        ILookup<bool, string> simulated = Identities.ToLookup(pair => pair.Value.IsSimulated, pair => pair.Key);
        if (simulated.Count > 1)
        {
            throw new BenchException(
                $"{string.Join(", ", simulated[true])} are simulated, {string.Join(", ", simulated[false])} are not; "
                    + "a mixture is neither a test nor a rehearsal, so nothing is done");
        }

        IsSimulated = simulated.Contains(true);
    }

    /// <summary>Keeps what was connected, to be closed; who cannot be reached is named by its role.</summary>
    private async Task<T> Reach<T>(string role, Task<T> connecting)
        where T : IDisposable
    {
        try
        {
            T reached = await connecting;
            _open.Push(reached);
            return reached;
        }
        catch (LinkException lost)
        {
            throw new BenchException($"{role}: {lost.Message}; nothing was energised");
        }
    }
}
