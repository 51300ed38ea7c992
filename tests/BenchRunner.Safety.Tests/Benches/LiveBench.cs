using System.Net.Sockets;
using System.Text;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Watches;
using BenchRunner.Signals.Units;

namespace BenchRunner.Safety.Tests.Benches;

/// <summary>A fake bench that runs, safety's connections to it, and a supply connection of the runner's.</summary>
internal sealed class LiveBench : IAsyncDisposable
{
    /// <summary>Charging current limit, A: the fake supply's at the pace used.</summary>
    private const double ChargingCurrent = 2.5;

    /// <summary>Replies that a loaded computer may hold up trip no sound bench here.</summary>
    public static SafetySettings Patient { get; } = SafetySettings.Usual with { ReplyWithin = 2 };

    private readonly List<IDisposable> _open = [];
    private readonly FakeProgram _fake;
    private SafetySupervisor? _supervisor;

    private LiveBench(FakeProgram fake) => _fake = fake;

    public SafetyRoles Roles { get; private set; } = null!;

    /// <summary>The runner's own connection.</summary>
    public ISupply Supply { get; private set; } = null!;

    public IPulser Pulser { get; private set; } = null!;

    public Recorder Said { get; } = new();

    /// <summary>The guardian as the supervisor sees it.</summary>
    public GuardianDouble Guardian { get; } = new();

    /// <summary>What the bleeder of this bench does: 5 kOhm across 50 uF.</summary>
    public static Discharge Discharge { get; } = new(5e3, 50e-6);

    public static async Task<LiveBench> Start(params string[] faults)
    {
        var bench = new LiveBench(await FakeProgram.Start(faults));
        bench._open.Add(bench._fake);
        CancellationToken cancel = TestContext.Current.CancellationToken;
        try
        {
            var options = new SessionOptions();
            SessionOptions watching = SessionOptions.Watching with
            {
                ReplyWithin = TimeSpan.FromSeconds(Patient.ReplyWithin),
            };
            ScpiInterlock interlock =
                bench.Keep(await ScpiInterlock.Connect(bench.At("interlock", watching), cancel));
            ScpiVoltmeter voltmeter =
                bench.Keep(await ScpiVoltmeter.Connect(bench.At("voltmeter", watching), cancel));
            ScpiSupply supply = bench.Keep(await ScpiSupply.Connect(bench.At("supply", options), cancel));
            ScpiPulser pulser = bench.Keep(await ScpiPulser.Connect(bench.At("pulser", options), cancel));
            bench.Roles = new SafetyRoles(
                pulser, supply, interlock, voltmeter, SupplyOutput: supply, PulserOutput: pulser);
            bench.Pulser = pulser;
            bench.Supply = bench.Keep(await ScpiSupply.Connect(bench.At("supply", options), cancel));
            return bench;
        }
        catch
        {
            await bench.DisposeAsync();
            throw;
        }
    }

    /// <summary>Leave to go up to a voltage.</summary>
    public static PermitBounds UpTo(double volts, double pulse = 10e-6) => new(
        $"{volts} V", new Volts(volts), new Amperes(ChargingCurrent), new Seconds(pulse), new Volts(18), new Volts(-5));

    private static TrainSettings Train { get; } = new(
        new Seconds(5e-6), new Seconds(2e-6), new Seconds(2e-6), new Volts(18), new Volts(-5));

    /// <summary>A supervisor over the bench; ended with it.</summary>
    public SafetySupervisor Supervisor(TimeProvider? time = null, Discharge? discharge = null) =>
        _supervisor = new SafetySupervisor(
            Roles, new Envelope(900, 120, 10, 20e-6),
            Witness(discharge, time), Guardian, Events(), time ?? TimeProvider.System);

    /// <summary>What the bench's voltmeter has shown; fresh.</summary>
    public static BusWitness Witness(Discharge? discharge = null, TimeProvider? time = null) =>
        new(discharge ?? Discharge, Patient, time ?? TimeProvider.System);

    /// <summary>A safe state without a watch.</summary>
    public SafeState SafeState(BusWitness witness) =>
        new(Roles.Safeable, witness, Events(), TimeProvider.System) { AfterProof = Roles.Pulser.TakeOffBiasAway };

    /// <summary>Charges the bank under a permit, as the runner does.</summary>
    public async Task Charge(Permit permit, SafetySupervisor supervisor, double volts)
    {
        CancellationToken cancel = TestContext.Current.CancellationToken;
        await Roles.Interlock.ReleaseBleeder(permit, cancel);
        await Supply.Program(permit, new Volts(volts), new Amperes(ChargingCurrent), new Volts(1.1 * volts), cancel);
        await Pulser.Program(permit, Train, cancel);
        await Pulser.CheckOffBias(cancel);
        supervisor.BiasVerified();
        supervisor.Energising(volts);
        await Supply.OutputOn(permit, cancel);
        await SupplyShows(volts);
    }

    /// <summary>Waits until the supply itself measures the voltage: its own word, not the independent one.</summary>
    public Task SupplyShows(double volts) => Eventually.True(
        async () => (await Supply.ReadState(TestContext.Current.CancellationToken)).Measured.Value > 0.97 * volts,
        $"the bus at {volts} V");

    /// <summary>Somebody else charges the bank: another program, or a hand at the supply's front panel.</summary>
    public async Task StrangerCharges(double volts)
    {
        await StrangerSets(volts);
        await Eventually.True(
            async () => (await Roles.Voltmeter.Read(TestContext.Current.CancellationToken)).Value > 0.97 * volts,
            $"{volts} V");
    }

    /// <summary>Somebody else sets the supply and switches it on.</summary>
    public Task StrangerSets(double volts) => Stranger(
        "supply", FormattableString.Invariant($"VOLT:PROT 900;:CURR {ChargingCurrent};:VOLT {volts};:OUTP ON"));

    /// <summary>Somebody else tells an instrument something.</summary>
    public async Task Stranger(string role, string message)
    {
        CancellationToken cancel = TestContext.Current.CancellationToken;
        LinkAddress address = LinkAddress.Parse(_fake.Links[role]);
        using var client = new TcpClient();
        await client.ConnectAsync(address.Host, address.Number, cancel);
        await client.GetStream().WriteAsync(Encoding.ASCII.GetBytes($"{message}\n"), cancel);
    }

    public void Do(string hand) => _fake.Do(hand);

    public void CutPower() => _fake.Kill();

    public async ValueTask DisposeAsync()
    {
        if (_supervisor is not null)
        {
            await _supervisor.DisposeAsync();
        }

        for (int i = _open.Count - 1; i >= 0; i--)
        {
            _open[i].Dispose();
        }
    }

    private EventSource Events() => new("test", Said, TimeProvider.System);

    private InstrumentConnection At(string role, SessionOptions options)
    {
        DialectFile file = DialectReader.Read(Repository.File("sequences", "dialects", $"generic-{role}.yaml")).Value!;
        return new InstrumentConnection(
            LinkAddress.Parse(_fake.Links[role]), new Dialect(file.Name, file.Identity, file.Commands), options,
            TimeProvider.System, Said);
    }

    private T Keep<T>(T link)
        where T : IDisposable
    {
        _open.Add(link);
        return link;
    }
}
