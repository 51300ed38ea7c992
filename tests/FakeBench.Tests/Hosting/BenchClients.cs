using System.Globalization;
using FakeBench.Faults;
using FakeBench.Hosting;

namespace FakeBench.Tests.Hosting;

/// <summary>A served bench and one client of each instrument.</summary>
internal sealed class BenchClients : IAsyncDisposable
{
    private readonly BenchServer _server;
    private readonly Dictionary<string, Client> _clients = [];

    private BenchClients(BenchServer server) => _server = server;

    public BenchServer Server => _server;

    public Client this[string role] => _clients[role];

    public static Task<BenchClients> Start(params string[] faults) => Start(TimeProvider.System, faults);

    public static async Task<BenchClients> Start(TimeProvider time, params string[] faults)
    {
        var options = new ServeOptions { Pace = 5, Faults = [.. faults.Select(Fault.Parse)] };
        var bench = new BenchClients(new BenchServer(options, time));
        foreach ((string role, string link) in bench._server.Links)
        {
            bench._clients[role] = await Client.Connect(link);
        }

        return bench;
    }

    public string Link(string role) => _server.Links.Single(l => l.Role == role).Link;

    /// <summary>Says something that must be obeyed without an error.</summary>
    public async Task Say(string role, string message)
    {
        await this[role].Say(message);
        Assert.Equal("0,\"No error\"", await this[role].Ask("SYST:ERR?"));
    }

    /// <summary>Charges the bank and waits until the voltmeter and the supply say that it stands.</summary>
    public async Task Charge(double volts)
    {
        await Say("interlock", "OUTP 0");
        await Say("supply", string.Create(CultureInfo.InvariantCulture, $"VOLT {volts};:OUTP 1"));
        await Until("supply", "STAT:OPER:COND?", condition => condition == "0");
        await Rest(volts);
    }

    /// <summary>Waits until the voltmeter, to its last digit of 1 mV, shows the end value: from there on the bank has the
    /// same bits whenever it is looked at.</summary>
    public Task Rest(double volts) =>
        Until("voltmeter", "MEAS:VOLT:DC?", v => Math.Abs(Value(v) - (volts * 1.0002)) < 0.0005);

    public async Task Configure()
    {
        await Say("pulser", "SOUR:PULS1:WIDT 8.08 US;:SOUR:PULS2:DEL 6 US;WIDT 3 US;:SOUR:VOLT:HIGH 18;LOW -4;:OUTP 1");
        await Say("scope", "SENS:VOLT2:RANG:UPP 1000;OFFS 400;:SENS:VOLT3:RANG:UPP 200;OFFS 40");
        await Say("scope", "SENS:SWE:TINT 1 NS;POIN 20000;OFFS:TIME 1 US;:TRIG:SOUR INT1;LEV 3");
        await Say("scope", "FORM INT,16;FORM:BORD SWAP");
    }

    public async Task Fire()
    {
        await Say("scope", "INIT");
        await Say("pulser", "INIT");
        Assert.Equal("32", await this["pulser"].Ask("STAT:OPER:COND?"));
        await Say("pulser", "TRIG");
        await Until("scope", "STAT:OPER:COND?", condition => condition == "0");
    }

    public async Task Until(string role, string question, Func<string, bool> wanted)
    {
        const int most = 100_000;
        string said = "";
        for (int i = 0; i < most; i++)
        {
            said = await this[role].Ask(question);
            if (wanted(said))
            {
                return;
            }
        }

        Assert.Fail($"{role}: {question} still says {said}");
    }

    public static double Value(string said) => double.Parse(said, CultureInfo.InvariantCulture);

    public async ValueTask DisposeAsync()
    {
        foreach (Client client in _clients.Values)
        {
            await client.DisposeAsync();
        }

        await _server.DisposeAsync();
    }
}
