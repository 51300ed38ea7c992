using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Sessions;
using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Instruments;

namespace BenchRunner.Soak.Simulated;

/// <summary>The fake bench in memory, and the links to it.</summary>
internal sealed class MemoryBench
{
    private const int MostClients = 4;
    private static readonly string[] _channels = ["vgs_low", "vds_low", "id_low", "vgs_high", "vds_high", "vbus"];

    private readonly VirtualTime _time;
    private readonly Func<TimeSpan> _latency;
    private readonly FrontPanels _panels;
    private readonly List<(string Role, MemoryLink Link, bool IsRunners)> _links = [];
    private readonly Dictionary<string, Beginning> _begun = [];
    private readonly IReadOnlyList<Fault> _faults;
    private bool _isRunnerGone;
    private long _counted;
    private long _measured;
    private double _volts;

    /// <summary>Makes a bench with a device in its socket.</summary>
    /// <param name="setup">What it is made of.</param>
    /// <param name="faults">What goes wrong.</param>
    /// <param name="time">The clock.</param>
    /// <param name="latency">How long the next message or reply takes.</param>
    /// <param name="trains">Where trains are computed.</param>
    public MemoryBench(
        BenchSetup setup, IEnumerable<Fault> faults, VirtualTime time, Func<TimeSpan> latency, TrainCache trains)
    {
        (_time, _latency) = (time, latency);
        _faults = [.. faults];
        Bench = new Bench(setup with { WorksAhead = false }, new FaultPlan(_faults), time);
        _panels = new FrontPanels(Bench, _channels, 12, trains);
    }

    /// <summary>The bench behind the instruments.</summary>
    public Bench Bench { get; }

    /// <summary>Links that nobody has closed, by role.</summary>
    public IEnumerable<string> Open => _links.Where(open => !open.Link.IsClosed).Select(open => open.Role);

    /// <summary>Trains that were fired.</summary>
    public long Fires { get; private set; }

    /// <summary>Trains that were fired while a fault was in force: one that begins with a train is there for it.</summary>
    public long FiresUnder(string fault) => _begun.TryGetValue(fault, out Beginning? at) ? Fires - at.FiresBefore : 0;

    /// <summary>Trains that were begun after a fault had.</summary>
    public long FiresAfter(string fault) => _begun.TryGetValue(fault, out Beginning? at) ? Fires - at.FiresWith : 0;

    /// <summary>Trains above 60 V that were fired while a fault was in force.</summary>
    public long MeasuredUnder(string fault) =>
        _begun.TryGetValue(fault, out Beginning? at) ? _measured - at.MeasuredBefore : 0;

    /// <summary>What the bank had when a fault began, V.</summary>
    public double VoltsAtBeginOf(string fault) =>
        _begun.TryGetValue(fault, out Beginning? at) ? at.Volts : double.PositiveInfinity;

    /// <summary>Opens a link of the runner's: <c>tcp ROLE 1</c>.</summary>
    public Task<ILink> Connect(
        LinkAddress address, SessionOptions options, TimeProvider time, CancellationToken cancel) => _isRunnerGone
            ? throw new LinkException(address.ToString(), "the run was ended")
            : Connect(address, isRunners: true, time, cancel);

    /// <summary>Opens a link of the guardian's.</summary>
    public Task<ILink> ConnectGuardian(
        LinkAddress address, SessionOptions options, TimeProvider time, CancellationToken cancel) =>
        Connect(address, isRunners: false, time, cancel);

    /// <summary>The runner is ended: what it still does reaches nothing.</summary>
    public void CutRunner()
    {
        _isRunnerGone = true;
        foreach ((_, MemoryLink link, _) in _links.Where(open => open.IsRunners))
        {
            link.Dispose();
        }
    }

    private async Task<ILink> Connect(
        LinkAddress address, bool isRunners, TimeProvider time, CancellationToken cancel)
    {
        await Task.Delay(_latency(), time, cancel);
        Instrument panel = _panels.All.Single(panel => panel.Role == address.Host);
        if (Bench.Faults.Has(LinkFault.Of(panel.Role, LinkFault.Refused)))
        {
            throw new LinkException(address.ToString(), "cannot connect (ConnectionRefused)");
        }

        int most = Bench.Faults.Has(FaultCatalogue.SingleClient) ? 1 : MostClients;
        var link = new MemoryLink(address.ToString(), panel, _time, _latency, NoteBegun);
        if (_links.Count(open => open.Role == panel.Role && !open.Link.IsClosed) >= most)
        {
            link.End();
        }

        _links.Add((panel.Role, link, isRunners));
        return link;
    }

    /// <summary>What the bank has now, V.</summary>
    public double BankVoltage
    {
        get
        {
            lock (Bench.Gate)
            {
                Bench.Advance();
                return Bench.BankVoltage;
            }
        }
    }

    /// <summary>After each message: what began with it or since the one before.</summary>
    private void NoteBegun()
    {
        (long fires, long measured) = (Fires, _measured);
        if (_panels.Pulser.Count is var count && count != _counted)
        {
            // A pulser that was started anew counts from 0.
            long more = count > _counted ? count - _counted : count;

            // A device that died has emptied the bank by now.
            _measured += Math.Max(_volts, Bench.BankVoltage) > 60 ? more : 0;
            (Fires, _counted) = (Fires + more, count);
        }

        _volts = Bench.BankVoltage;
        foreach (Fault fault in _faults)
        {
            if (Bench.Faults.Has(fault.Name))
            {
                _begun.TryAdd(fault.Name, new Beginning(fires, Fires, measured, _volts));
            }
        }
    }

    /// <summary>A fault's beginning.</summary>
    /// <param name="FiresBefore">Trains fired before it.</param>
    /// <param name="FiresWith">Those, and the one that it began with.</param>
    /// <param name="MeasuredBefore">Trains above 60 V before it.</param>
    /// <param name="Volts">What the bank had, V.</param>
    private sealed record Beginning(long FiresBefore, long FiresWith, long MeasuredBefore, double Volts);
}
