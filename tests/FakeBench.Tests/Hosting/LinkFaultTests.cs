using FakeBench.Faults;
using FakeBench.Hosting;
using FakeBench.Hosting.Hislip;
using FakeBench.Tests.Hosting.Hislip;

namespace FakeBench.Tests.Hosting;

/// <summary>Faults of a link on a serial line and over HiSLIP, on real devices and sockets.</summary>
/// <remarks>How long something takes is looked at in one direction only: never sooner than the fault says.</remarks>
public sealed class LinkFaultTests
{
    /// <summary>The framework's timers count whole milliseconds, and each may end one too early.</summary>
    private const double Early = 0.95;

    private const string Identity = "BENCHRUNNER,FAKEBENCH-INTERLOCK,0,1";

    [Theory]
    [InlineData("interlock/late-reply@seconds:0", 4.0)]
    [InlineData("interlock/halves@seconds:0", 0.1)]
    public async Task On_a_serial_line_a_reply_is_late_or_comes_in_pieces(string fault, double least)
    {
        await using BenchClients bench = await BenchClients.Start(fault);
        long asked = TimeProvider.System.GetTimestamp();
        Assert.Equal(Identity, await bench["interlock"].Ask("*IDN?"));
        Assert.InRange(TimeProvider.System.GetElapsedTime(asked).TotalSeconds, Early * least, 60);
    }

    [Fact]
    public async Task On_a_serial_line_a_reply_drips()
    {
        await using BenchClients bench = await BenchClients.Start("interlock/drip@seconds:0");
        long asked = TimeProvider.System.GetTimestamp();
        Assert.Equal("1", await bench["interlock"].Ask("*OPC?"));
        Assert.InRange(TimeProvider.System.GetElapsedTime(asked).TotalSeconds, Early * 0.2, 60);
    }

    [Theory]
    [InlineData("interlock/reply-twice@seconds:0", "BENCHRUNNER,FAKEBENCH-INTERLOCK,0,1", "BENCHRUNNER,FAKEBENCH-INTERLOCK,0,1")]
    [InlineData("interlock/echo@seconds:0", "*IDN?", "BENCHRUNNER,FAKEBENCH-INTERLOCK,0,1")]
    [InlineData("interlock/reply-lost@seconds:0", "1999.0", null)]
    [InlineData("interlock/reboot@seconds:0", "1999.0", null)]
    public async Task On_a_serial_line_replies_are_doubled_echoed_or_lost(string fault, string first, string? second)
    {
        await using BenchClients bench = await BenchClients.Start(fault);
        await bench["interlock"].Say("*IDN?");
        await bench["interlock"].Say("SYST:VERS?");
        Assert.Equal(first, await bench["interlock"].Line());
        if (second is not null)
        {
            Assert.Equal(second, await bench["interlock"].Line());
        }
    }

    [Fact]
    public async Task On_a_serial_line_a_reply_holds_garbage_once_and_ends_wrongly_for_good()
    {
        await using BenchClients garbled = await BenchClients.Start("interlock/garbage@seconds:0");
        Assert.Contains("\u00ff\u0080\u0002", await garbled["interlock"].Ask("*IDN?"), StringComparison.Ordinal);
        Assert.Equal(Identity, await garbled["interlock"].Ask("*IDN?"));

        await using BenchClients endless = await BenchClients.Start("interlock/wrong-end@seconds:0");
        await endless["interlock"].Say("*IDN?");
        Assert.Equal(Identity, await endless["interlock"].Until('\r'));
    }

    [Fact]
    public async Task A_half_open_serial_line_takes_everything_and_gives_nothing()
    {
        await using BenchClients bench = await BenchClients.Start("interlock/half-open@volts:20");
        Assert.Equal(Identity, await bench["interlock"].Ask("*IDN?"));
        await bench.Charge(48);
        Task<string> never = bench["interlock"].Ask("*IDN?");

        // Asked after it, answered before it: all the others live on.
        Assert.Equal("1", await bench["supply"].Ask("*OPC?"));
        await bench["interlock"].Say("*OPC?");
        Assert.Equal("1", await bench["voltmeter"].Ask("*OPC?"));
        Assert.False(never.IsCompleted);
    }

    [Theory]
    [InlineData("supply/late-reply@seconds:0", "SYST:VERS?", "1999.0", 4.0)]
    [InlineData("supply/halves@seconds:0", "SYST:VERS?", "1999.0", 0.1)]
    [InlineData("supply/drip@seconds:0", "*OPC?", "1", 3.4)]
    public async Task Over_HiSLIP_a_reply_is_late_or_comes_in_pieces(
        string fault, string question, string reply, double least)
    {
        await using BenchServer server = Served(fault);
        using HislipClient client = await HislipClient.Connect(Supply(server));
        long asked = TimeProvider.System.GetTimestamp();
        await client.Say(0xffff_ff00, question + "\n");
        Assert.Equal(reply + "\n", await client.Heard(0xffff_ff00));
        Assert.InRange(TimeProvider.System.GetElapsedTime(asked).TotalSeconds, Early * least, 60);
    }

    [Fact]
    public async Task A_half_open_HiSLIP_link_answers_on_neither_channel()
    {
        await using BenchServer server = Served("supply/half-open@seconds:0");
        using HislipClient client = await HislipClient.Connect(Supply(server));
        await client.Say(0xffff_ff00, "*OPC?\n");
        Task<Frame> reply = client.Next(client.Synchronous);

        // Opening is the server's, and goes on; the second client's message is obeyed after the first one's.
        using HislipClient other = await HislipClient.Connect(Supply(server));
        await other.Say(0xffff_ff00, "*OPC?\n");
        Task<Frame> others = other.Next(other.Synchronous);
        string voltmeter = server.Links.Single(l => l.Role == "voltmeter").Link;
        using HislipClient alive = await HislipClient.Connect(voltmeter);
        await alive.Say(0xffff_ff00, "*OPC?\n");
        Assert.Equal("1\n", await alive.Heard(0xffff_ff00));
        Assert.False(reply.IsCompleted);
        Assert.False(others.IsCompleted);
    }

    [Theory]
    [InlineData("supply/link-drops@seconds:0")]
    [InlineData("supply/reboot@seconds:0")]
    public async Task Over_HiSLIP_a_reset_ends_both_channels(string fault)
    {
        await using BenchServer server = Served(fault);
        using HislipClient client = await HislipClient.Connect(Supply(server));
        await client.Say(0xffff_ff00, "*IDN?\n");
        await Assert.ThrowsAnyAsync<Exception>(async () =>
        {
            while (true)
            {
                await client.Next(client.Synchronous);
            }
        });
        Assert.True(await client.IsClosed(client.Asynchronous));
        using HislipClient again = await HislipClient.Connect(Supply(server));
        await again.Say(0xffff_ff00, "*OPC?\n");
        Assert.Equal("1\n", await again.Heard(0xffff_ff00));
    }

    [Theory]
    [InlineData("supply/garbage@seconds:0", "\u00ff\u0080\u0002")]
    [InlineData("supply/reply-twice@seconds:0", "0,1\nBENCHRUNNER")]
    public async Task Over_HiSLIP_a_reply_is_spoilt_as_over_TCP(string fault, string shown)
    {
        await using BenchServer server = Served(fault);
        using HislipClient client = await HislipClient.Connect(Supply(server));
        await client.Say(0xffff_ff00, "*IDN?\n");
        Assert.Contains(shown, await client.Heard(0xffff_ff00), StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("interlock/link-drops", "serial", "no connection that could be reset")]
    [InlineData("interlock/wrong-end", "hislip", "not with a character")]
    [InlineData("scope/echo", "hislip", "no terminal that could echo")]
    public void A_fault_that_a_link_cannot_have_is_refused(string fault, string link, string why)
    {
        string[] links = link == "hislip" ? ["--links", "hislip", "--interlock", "tcp"] : ["--interlock", "serial"];
        FormatException refused = Assert.Throws<FormatException>(() => Arguments.Parse([.. links, "--fault", fault]));
        Assert.Contains(fault, refused.Message, StringComparison.Ordinal);
        Assert.Contains(why, refused.Message, StringComparison.Ordinal);
        Assert.Single(Arguments.Parse(["--links", "tcp", "--interlock", "tcp", "--fault", fault]).Faults);
    }

    private static BenchServer Served(string fault) =>
        new(new ServeOptions { Hislip = true, Faults = [Fault.Parse(fault)] }, TimeProvider.System);

    private static string Supply(BenchServer server) => server.Links.Single(l => l.Role == "supply").Link;
}
