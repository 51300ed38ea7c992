using System.Net;
using System.Net.Sockets;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Links;

public class LinkTests
{
    private static readonly TimeSpan Long = TimeSpan.FromSeconds(30);
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;

    private Task<ILink> Open(string address, TimeSpan? writeWithin = null) =>
        Link.Open(
            LinkAddress.Parse(address),
            new SessionOptions { ConnectWithin = Long, WriteWithin = writeWithin ?? Long },
            TimeProvider.System,
            _cancel);

    [Fact]
    public async Task Bytes_go_out_and_come_in_over_a_socket_and_its_end_is_seen()
    {
        using var listener = new TcpListener(IPAddress.Loopback, 0);
        listener.Start();
        using var link = await Open($"tcp 127.0.0.1 {((IPEndPoint)listener.LocalEndpoint).Port}");
        using var far = await listener.AcceptSocketAsync(_cancel);
        var buffer = new byte[16];

        link.Write("*IDN?\n"u8);
        Assert.Equal(6, await far.ReceiveAsync(buffer, _cancel));
        Assert.False(link.HasInput);
        await far.SendAsync("A\n"u8.ToArray(), _cancel);
        await Clock.Until(() => link.HasInput);
        Assert.Equal(2, await link.Read(buffer, _cancel));
        far.Close();
        Assert.Equal(0, await link.Read(buffer, _cancel));
    }

    [Fact]
    public async Task A_write_that_the_other_side_does_not_take_is_bounded()
    {
        using var listener = new TcpListener(IPAddress.Loopback, 0);
        listener.Start();
        using var link =
            await Open($"tcp 127.0.0.1 {((IPEndPoint)listener.LocalEndpoint).Port}", TimeSpan.FromMilliseconds(50));
        using var far = await listener.AcceptSocketAsync(_cancel);
        var lump = new byte[1 << 20];

        // Nothing reads on the far side: sooner or later the system's buffers are full.
        Assert.Throws<LinkException>(() =>
        {
            for (var n = 0; n < 1000; n++)
            {
                link.Write(lump);
            }
        });
    }

    [Fact]
    public async Task A_cancelled_read_takes_nothing()
    {
        using var listener = new TcpListener(IPAddress.Loopback, 0);
        listener.Start();
        using var link = await Open($"tcp 127.0.0.1 {((IPEndPoint)listener.LocalEndpoint).Port}");
        using var far = await listener.AcceptSocketAsync(_cancel);
        using var stop = new CancellationTokenSource();
        var buffer = new byte[16];
        var read = link.Read(buffer, stop.Token);
        await stop.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(async () => await read);

        await far.SendAsync("A\n"u8.ToArray(), _cancel);
        Assert.Equal(2, await link.Read(buffer, _cancel));
    }

    [Fact]
    public async Task A_read_waits_past_a_moment_also_again_after_one_that_was_given_up()
    {
        using var listener = new TcpListener(IPAddress.Loopback, 0);
        listener.Start();
        using var link = await Open($"tcp 127.0.0.1 {((IPEndPoint)listener.LocalEndpoint).Port}");
        using var far = await listener.AcceptSocketAsync(_cancel);
        var buffer = new byte[16];
        for (byte n = 0; n < 20; n++)
        {
            using var stop = new CancellationTokenSource();
            var given = link.Read(buffer, stop.Token).AsTask();
            await stop.CancelAsync();
            await Assert.ThrowsAnyAsync<OperationCanceledException>(() => given);

            // Under way before anything is sent: nothing is there for it yet.
            var read = link.Read(buffer, _cancel).AsTask();
            Assert.False(read.IsCompleted);
            await far.SendAsync(new byte[] { n }, _cancel);
            Assert.Equal((1, n), (await read, buffer[0]));
        }
    }

    [Fact]
    public async Task Closing_the_link_ends_a_read_that_waits()
    {
        using var listener = new TcpListener(IPAddress.Loopback, 0);
        listener.Start();
        using var link = await Open($"tcp 127.0.0.1 {((IPEndPoint)listener.LocalEndpoint).Port}");
        using var far = await listener.AcceptSocketAsync(_cancel);
        var read = link.Read(new byte[16], _cancel).AsTask();
        link.Dispose();
        await Assert.ThrowsAsync<LinkException>(() => read);
    }

    [Fact]
    public async Task A_connection_that_nobody_takes_is_given_up_in_time()
    {
        // A queue of no length, filled: the system leaves the next one unanswered.
        using var listener = new Socket(AddressFamily.InterNetwork, SocketType.Stream, ProtocolType.Tcp);
        listener.Bind(new IPEndPoint(IPAddress.Loopback, 0));
        listener.Listen(0);
        var port = ((IPEndPoint)listener.LocalEndPoint!).Port;
        var options = new SessionOptions { ConnectWithin = TimeSpan.FromMilliseconds(300), WriteWithin = Long };
        List<ILink> taken = [];
        var e = await Assert.ThrowsAsync<LinkException>(async () =>
        {
            for (var n = 0; n < 10; n++)
            {
                taken.Add(await Link.Open(
                    LinkAddress.Parse($"tcp 127.0.0.1 {port}"), options, TimeProvider.System, _cancel));
            }
        });
        Assert.Contains("no answer within 0.3 s", e.Message, StringComparison.Ordinal);
        taken.ForEach(link => link.Dispose());
    }

    [Fact]
    public async Task A_port_where_nothing_listens_is_named()
    {
        var listener = new TcpListener(IPAddress.Loopback, 0);
        listener.Start();
        var port = ((IPEndPoint)listener.LocalEndpoint).Port;
        listener.Dispose();

        var e = await Assert.ThrowsAsync<LinkException>(() => Open($"tcp 127.0.0.1 {port}"));
        Assert.Equal($"tcp 127.0.0.1 {port}", e.Link);
    }

    [Fact]
    public async Task A_serial_port_that_is_not_there_is_named()
    {
        var e = await Assert.ThrowsAsync<LinkException>(() => Open("serial /dev/no-such-port"));
        Assert.Equal("serial /dev/no-such-port", e.Link);
    }

    [Fact]
    public async Task All_bytes_pass_a_serial_line_unchanged()
    {
        Assert.SkipUnless(OperatingSystem.IsLinux(), "needs a pseudo terminal");
        using var terminal = new Terminal();
        using var link = await Open($"serial {terminal.Path}");
        var all = Enumerable.Range(0, 256).Select(i => (byte)i).ToArray();

        link.Write(all);
        Assert.Equal(all, Exactly(256, terminal.Read));
        terminal.Write(all);
        var come = new List<byte>();
        var buffer = new byte[64];
        while (come.Count < 256)
        {
            come.AddRange(buffer.AsSpan(0, await link.Read(buffer, _cancel)));
        }

        Assert.Equal(all, come);
        Assert.False(link.HasInput);
    }

    private static byte[] Exactly(int count, Func<byte[], int> read)
    {
        var come = new List<byte>();
        var buffer = new byte[64];
        while (come.Count < count)
        {
            come.AddRange(buffer.AsSpan(0, read(buffer)));
        }

        return [.. come];
    }
}
