using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Hosting.Hislip;
using FakeBench.Instruments;

namespace FakeBench.Hosting;

/// <summary>A whole bench on its links: over raw sockets or HiSLIP, but the interlock as a serial device where there are any.</summary>
public sealed class BenchServer : IAsyncDisposable
{
    private const int MostClients = 4;
    private readonly List<(string Role, IHost Host)> _hosts = [];
    private readonly FrontPanels _panels;

    /// <summary>Starts all instruments.</summary>
    /// <param name="options">What is asked for.</param>
    /// <param name="time">The clock.</param>
    public BenchServer(ServeOptions options, TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(options);
        var faults = new FaultPlan(options.Faults);
        Bench = new Bench(options.Setup, faults, time);
        int clients = faults.Has(FaultCatalogue.SingleClient) ? 1 : MostClients;
        _panels = new FrontPanels(Bench, options.Channels, options.Bits);
        foreach (Instrument panel in _panels.All)
        {
            if (faults.Has(LinkFault.Of(panel.Role, LinkFault.Refused)))
            {
                _hosts.Add((panel.Role, new NoHost()));
                continue;
            }

            _hosts.Add((panel.Role, options.LinkOf(panel.Role) == "serial"
                ? new SerialHost(panel, time)
                : options.LinkOf(panel.Role) == "hislip"
                    ? new HislipHost(panel, new ServerTerms { MostClients = clients }, time)
                    : new TcpHost(panel, clients, time)));
        }
    }

    /// <summary>The bench behind the instruments.</summary>
    public Bench Bench { get; }

    /// <summary>Roles and their links.</summary>
    public IReadOnlyList<(string Role, string Link)> Links => [.. _hosts.Select(h => (h.Role, h.Host.Link))];

    /// <summary>Clients that are connected to any instrument.</summary>
    public int Clients => _hosts.Sum(h => h.Host.Clients);

    /// <summary>The bench's own truth, at this moment.</summary>
    public BenchTruth Look()
    {
        lock (Bench.Gate)
        {
            Bench.Advance();
            return new BenchTruth(
                OutputsOff: !Bench.Supply.Output && (!_panels.Pulser.CanFire || !Bench.Chain.Closed),
                BankVoltage: Bench.BankVoltage);
        }
    }

    /// <summary>Lets the operator's hands do something.</summary>
    /// <returns>Why it could not be done; null: done.</returns>
    public string? Do(string hand)
    {
        lock (Bench.Gate)
        {
            Bench.Advance();
            return Bench.Do(hand);
        }
    }

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        foreach ((_, IHost host) in _hosts)
        {
            await host.DisposeAsync();
        }
    }
}
