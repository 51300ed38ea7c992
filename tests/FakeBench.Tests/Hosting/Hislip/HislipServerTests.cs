using System.Buffers.Binary;
using System.Net.Sockets;
using FakeBench.Hosting;
using FakeBench.Hosting.Hislip;

namespace FakeBench.Tests.Hosting.Hislip;

/// <summary>The server beside the vectors: replies, interruptions, locks, the number of clients (IVI-6.1).</summary>
public sealed class HislipServerTests : IAsyncLifetime
{
    private readonly BenchServer _server = new(new ServeOptions { Hislip = true }, TimeProvider.System);

    private string Supply => _server.Links.Single(l => l.Role == "supply").Link;

    public ValueTask InitializeAsync() => ValueTask.CompletedTask;

    public ValueTask DisposeAsync() => _server.DisposeAsync();

    [Fact]
    public void All_but_a_serial_interlock_are_served_over_HiSLIP()
    {
        Assert.All(
            _server.Links.Where(l => l.Role != "interlock"),
            l => Assert.StartsWith("hislip 127.0.0.1:", l.Link, StringComparison.Ordinal));
        string file = BenchFile.Write(new ServeOptions { Hislip = true }, _server.Links);
        Assert.Contains($"supply: {{ link: '{Supply}', dialect: generic-supply, connections: 4", file, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_message_is_obeyed_at_its_end_with_or_without_a_newline_and_in_parts()
    {
        using HislipClient client = await HislipClient.Connect(Supply);
        await client.Say(0xffff_ff00, "*O", kind: Kind.Data);
        await client.Say(0xffff_ff02, "PC?");
        Assert.Equal("1\n", await client.Heard(0xffff_ff02));
    }

    [Fact]
    public async Task A_reply_is_cut_to_what_the_client_takes_header_counted()
    {
        using HislipClient client = await HislipClient.Connect(Supply);
        byte[] longest = new byte[8];
        BinaryPrimitives.WriteUInt64BigEndian(longest, 24);
        await client.Ask(client.Asynchronous, new Frame(Kind.AsyncMaximumMessageSize, 0, 0, longest));
        await client.Say(0xffff_ff00, "*IDN?\n");
        var parts = new List<Frame>();
        do
        {
            parts.Add(await client.Next(client.Synchronous));
        }
        while (parts[^1].Kind == Kind.Data);
        Assert.All(parts, p => Assert.True(p.Payload.Length <= 8));
        Assert.Equal(
            "BENCHRUNNER,FAKEBENCH-SUPPLY,0,1\n",
            string.Concat(parts.Select(p => System.Text.Encoding.Latin1.GetString(p.Payload))));
    }

    [Fact]
    public async Task A_message_before_the_reply_was_read_interrupts_it_on_both_channels()
    {
        using HislipClient client = await HislipClient.Connect(Supply);
        await client.Say(0xffff_ff00, "*OPC?\n");
        Assert.Equal("1\n", await client.Heard(0xffff_ff00));
        Assert.Equal(1 << 4, (await client.Request(Kind.AsyncStatusQuery, parameter: 0xffff_ff00)).Control & (1 << 4));
        await client.Say(0xffff_ff02, "SYST:ERR?\n");
        Assert.Equal(Kind.Interrupted, (await client.Next(client.Synchronous)).Kind);
        Assert.Equal(Kind.AsyncInterrupted, (await client.Next(client.Asynchronous)).Kind);
        Assert.Equal("-410,\"Query INTERRUPTED\"\n", await client.Heard(0xffff_ff02));

        // Read now, as the status query says: no interruption.
        Assert.Equal(0, (await client.Request(Kind.AsyncStatusQuery, 1, 0xffff_ff02)).Control & (1 << 4));
        await client.Say(0xffff_ff04, "SYST:ERR?\n");
        Assert.Equal("0,\"No error\"\n", await client.Heard(0xffff_ff04));
    }

    [Fact]
    public async Task While_one_client_holds_the_lock_another_one_changes_nothing_and_reads_the_status_only()
    {
        using HislipClient holder = await HislipClient.Connect(Supply);
        using HislipClient other = await HislipClient.Connect(Supply);
        Assert.Equal(1, (await holder.Request(Kind.AsyncLock, 1)).Control);
        Assert.Equal(0, (await other.Request(Kind.AsyncLock, 1)).Control);
        await other.Say(0xffff_ff00, "VOLT 7;VOLT?\n");
        Assert.Equal(Kind.AsyncStatusResponse, (await other.Request(Kind.AsyncStatusQuery)).Kind);
        Frame info = await other.Request(Kind.AsyncLockInfo);
        Assert.Equal((1, 1u), (info.Control, info.Parameter));
        await holder.Say(0xffff_ff00, "VOLT?\n");
        Assert.Equal(0, double.Parse(await holder.Heard(0xffff_ff00), System.Globalization.CultureInfo.InvariantCulture));

        // The lock ends with the connection, and what waited is obeyed.
        holder.Dispose();
        Assert.Equal(7, double.Parse(await other.Heard(0xffff_ff00), System.Globalization.CultureInfo.InvariantCulture));
    }

    [Fact]
    public async Task A_lock_is_shared_by_those_who_name_it_alike()
    {
        using HislipClient one = await HislipClient.Connect(Supply);
        using HislipClient two = await HislipClient.Connect(Supply);
        using HislipClient three = await HislipClient.Connect(Supply);
        Assert.Equal(1, (await one.Request(Kind.AsyncLock, 1, 0, "bench1")).Control);
        Assert.Equal(1, (await two.Request(Kind.AsyncLock, 1, 0, "bench1")).Control);
        Assert.Equal(3, (await two.Request(Kind.AsyncLock, 1, 0, "bench1")).Control);
        Assert.Equal(0, (await three.Request(Kind.AsyncLock, 1, 0, "bench2")).Control);
        Assert.Equal(0, (await three.Request(Kind.AsyncLock, 1)).Control);
        Frame info = await three.Request(Kind.AsyncLockInfo);
        Assert.Equal((0, 2u), (info.Control, info.Parameter));
        await two.Say(0xffff_ff00, "*OPC?\n");
        Assert.Equal("1\n", await two.Heard(0xffff_ff00));

        // A request that waits is granted when the last sharer has gone.
        Task<Frame> waits = three.Request(Kind.AsyncLock, 1, 60_000);
        Assert.Equal(2, (await one.Request(Kind.AsyncLock, 0)).Control);
        Assert.Equal(2, (await two.Request(Kind.AsyncLock, 0)).Control);
        Assert.Equal(1, (await waits).Control);
        Assert.Equal(3, (await one.Request(Kind.AsyncLock, 0)).Control);
    }

    [Fact]
    public async Task Four_clients_are_served_and_a_fifth_is_told_why_not()
    {
        var clients = new List<HislipClient>();
        for (int i = 0; i < 4; i++)
        {
            clients.Add(await HislipClient.Connect(Supply));
        }

        using Socket fifth = await clients[0].Open();
        Frame told = await clients[0].Ask(fifth, new Frame(Kind.Initialize, 0, 0x0100_5858, []));
        Assert.Equal((Kind.FatalError, 4), (told.Kind, told.Control));
        clients.ForEach(c => c.Dispose());
    }

    [Fact]
    public async Task Data_before_both_channels_are_there_ends_the_session()
    {
        using HislipClient client = await HislipClient.Connect(Supply);
        using Socket alone = await client.Open();
        await client.Ask(alone, new Frame(Kind.Initialize, 0, 0x0100_5858, []));
        Frame told = await client.Ask(alone, new Frame(Kind.DataEnd, 0, 0xffff_ff00, "*IDN?\n"u8.ToArray()));
        Assert.Equal((Kind.FatalError, 2), (told.Kind, told.Control));
    }
}
