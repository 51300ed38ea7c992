using System.Text;
using FakeBench.Fixtures;
using FakeBench.Hosting;
using Microsoft.Extensions.Time.Testing;

namespace FakeBench.Tests.Hosting;

public sealed class ServerTests
{
    [Fact]
    public async Task Every_instrument_answers_on_its_own_link()
    {
        await using BenchClients bench = await BenchClients.Start();
        foreach (string role in (string[])["supply", "pulser", "scope", "voltmeter", "interlock"])
        {
            Assert.Equal($"BENCHRUNNER,FAKEBENCH-{role.ToUpperInvariant()},0,1", await bench[role].Ask("*IDN?"));
        }
    }

    [Fact]
    public async Task A_bench_is_charged_armed_fired_read_and_bled()
    {
        await using BenchClients bench = await BenchClients.Start();
        await bench.Say("interlock", "SYST:WATC:TIME 60");
        await bench.Charge(600);
        await bench.Configure();
        await bench.Fire();
        Assert.Equal("1", await bench["pulser"].Ask("SOUR:PULS:COUN?"));
        string[] preamble = (await bench["scope"].Ask("TRAC:PRE? INT2")).Split(',');
        byte[] block = await bench["scope"].Block("TRAC:DATA? INT2");
        Assert.Equal(2 * BenchClients.Value(preamble[0]), block.Length);
        double Volts(int sample) => BenchClients.Value(preamble[5])
            + ((BitConverter.ToInt16(block, 2 * sample) - BenchClients.Value(preamble[6]))
                * BenchClients.Value(preamble[4]));
        Assert.Equal(600, Volts(100), 3.0);
        Assert.InRange(Volts(5000), 0, 3);
        await bench.Say("supply", "OUTP 0");
        await bench.Say("interlock", "OUTP 1");
        Assert.Equal("1,0,1,0", await bench["interlock"].Ask("SENS:DATA?"));
        await bench.Until("voltmeter", "MEAS:VOLT?", volts => BenchClients.Value(volts) < 60);
    }

    [Fact]
    public async Task One_seed_gives_identical_blocks_whatever_the_timing()
    {
        var records = new List<byte[]>();
        for (int round = 0; round < 2; round++)
        {
            await using BenchClients bench = await BenchClients.Start();
            await bench.Charge(600);
            for (int i = 0; i < 50 * round; i++)
            {
                await bench["voltmeter"].Ask("MEAS:VOLT?"); // the second round is slower
            }

            await bench.Configure();
            await bench.Fire();
            await bench.Rest(600);
            await bench.Fire();
            for (int input = 1; input <= 6; input++)
            {
                records.Add(await bench["scope"].Block($"TRAC:DATA? INT{input}"));
            }
        }

        Assert.Equal(records[..6], records[6..]);
    }

    [Fact]
    public async Task Four_clients_are_served_at_once_and_a_fifth_is_closed()
    {
        await using BenchClients bench = await BenchClients.Start();
        var more = new List<Client>();
        for (int i = 0; i < 3; i++)
        {
            more.Add(await Client.Connect(bench.Link("supply")));
            Assert.Contains("SUPPLY", await more[i].Ask("*IDN?"), StringComparison.Ordinal);
        }

        await using Client fifth = await Client.Connect(bench.Link("supply"));
        Assert.True(await fifth.IsClosed());
        Assert.Contains("SUPPLY", await bench["supply"].Ask("*IDN?"), StringComparison.Ordinal);
        foreach (Client client in more)
        {
            await client.DisposeAsync();
        }
    }

    [Fact]
    public async Task A_single_client_keeps_the_second_out()
    {
        await using BenchClients bench = await BenchClients.Start("single-client");
        Assert.Contains("SCOPE", await bench["scope"].Ask("*IDN?"), StringComparison.Ordinal);
        await using Client second = await Client.Connect(bench.Link("scope"));
        Assert.True(await second.IsClosed());
    }

    [Fact]
    public async Task A_dropped_link_ends_in_the_middle_of_the_block_and_can_be_opened_again()
    {
        await using BenchClients bench = await BenchClients.Start("link-drops@block:1");
        await bench.Charge(48);
        await bench.Configure();
        await bench.Fire();
        await Assert.ThrowsAnyAsync<IOException>(() => bench["scope"].Block("TRAC:DATA? INT1"));
        await using Client again = await Client.Connect(bench.Link("scope"));
        Assert.Equal(40_000, (await again.Block("TRAC:DATA? INT1")).Length);
    }

    [Fact]
    public async Task A_late_reply_comes_before_the_next_one_and_holds_up_nobody_else()
    {
        var time = new FakeTimeProvider();
        await using BenchClients bench = await BenchClients.Start(time, "late-reply@seconds:0");
        await using Client other = await Client.Connect(bench.Link("scope"));
        await bench["scope"].Say("*IDN?");
        await bench["scope"].Say("SYST:VERS?");
        await Acted(bench.Server.Bench, "scope/late-reply");
        Assert.Equal("0,\"No error\"", await bench["supply"].Ask("SYST:ERR?"));
        Task<string> late = bench["scope"].Line();
        Assert.Equal("1", await other.Ask("*OPC?"));
        Assert.False(late.IsCompleted);
        for (int i = 0; i < 100_000 && !late.IsCompleted; i++)
        {
            time.Advance(TimeSpan.FromSeconds(1));
            await other.Ask("*OPC?");
        }

        Assert.Contains("SCOPE", await late, StringComparison.Ordinal);
        Assert.Equal("1999.0", await bench["scope"].Line());
    }

    [Fact]
    public async Task A_line_without_end_is_an_overrun_and_the_next_one_is_obeyed()
    {
        await using BenchClients bench = await BenchClients.Start();
        byte[] endless = Encoding.ASCII.GetBytes(new string('x', 200_000) + "\n");
        await bench["supply"].Send(endless);
        Assert.Equal("-363,\"Input buffer overrun\"", await bench["supply"].Ask("SYST:ERR?"));
    }

    [Fact]
    public async Task A_message_may_come_in_pieces_and_several_at_once()
    {
        await using BenchClients bench = await BenchClients.Start();
        foreach (string role in (string[])["voltmeter", "interlock"])
        {
            foreach (byte piece in "*OPC?\r\n"u8.ToArray())
            {
                await bench[role].Send([piece]);
            }

            Assert.Equal("1", await bench[role].Line());
            await bench[role].Send("*OPC?\n*TST?\n"u8.ToArray());
            Assert.Equal(("1", "0"), (await bench[role].Line(), await bench[role].Line()));
        }
    }

    [Fact]
    public async Task The_serial_line_survives_a_client_that_leaves()
    {
        await using BenchClients bench = await BenchClients.Start();
        await bench["interlock"].DisposeAsync();
        await using Client next = await Client.Connect(bench.Link("interlock"));
        Assert.Equal("1,0,1,0", await next.Ask("SENS:DATA?"));
    }

    [Fact]
    public async Task Without_pseudo_terminals_the_interlock_is_served_over_TCP()
    {
        await using var server = new BenchServer(new ServeOptions { SerialInterlock = false }, TimeProvider.System);
        await using Client interlock = await Client.Connect(server.Links.Single(l => l.Role == "interlock").Link);
        Assert.Equal("1,0,1,0", await interlock.Ask("SENS:DATA?"));
    }

    [Fact]
    public async Task Hands_open_the_loop()
    {
        await using BenchClients bench = await BenchClients.Start();
        Assert.Null(bench.Server.Do("open"));
        Assert.Equal("0,0,1,0", await bench["interlock"].Ask("SENS:DATA?"));
    }

    /// <summary>Two clients' messages have no order of their own: the other one asks only when the late reply is taken.</summary>
    private static async Task Acted(Bench bench, string fault)
    {
        using CancellationTokenSource bound = new(TimeSpan.FromSeconds(30));
        while (true)
        {
            lock (bench.Gate)
            {
                if (bench.Faults.HasActed(fault))
                {
                    return;
                }
            }

            await Task.Delay(TimeSpan.FromMilliseconds(1), TimeProvider.System, bound.Token);
        }
    }
}
