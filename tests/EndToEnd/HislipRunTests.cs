using System.Buffers.Binary;
using System.Globalization;
using System.Net;
using System.Net.Sockets;

namespace EndToEnd;

/// <summary>A whole run over HiSLIP, and what a second controller's lock does to one (IVI-6.1, 6.5).</summary>
public sealed class HislipRunTests : IDisposable
{
    private readonly Workplace _place = new();
    private Started? _bench;

    public void Dispose()
    {
        _bench?.Dispose();
        _place.Dispose();
    }

    [Fact]
    public async Task A_whole_run_goes_over_HiSLIP()
    {
        string file = await Serve();
        Finished ended = (await Run(file)).Expect(0);
        Assert.Contains("ACCEPTED", ended.Output, StringComparison.Ordinal);
        Assert.Equal(10, _place.Ask<long>("select captures_valid from device_outcomes"));
        Assert.Equal(
            0, _place.Ask<long>("select count(*) from events where kind in ('link-doubt', 'link-broken')"));
    }

    [Fact]
    public async Task An_instrument_that_another_controller_has_locked_is_not_used_until_it_is_free()
    {
        string file = await Serve();
        Socket[] other = await Lock(file);
        Finished refused = (await Run(file)).Expect(5);
        Assert.Contains("locked by another controller", refused.All, StringComparison.Ordinal);
        Assert.Contains("nothing was energised", refused.All, StringComparison.Ordinal);
        foreach (Socket socket in other)
        {
            socket.Dispose();
        }
    }

    private async Task<string> Serve()
    {
        string file = _place.Path("hislip.yaml");
        _bench = _place.Start(
            Workplace.FakeBench,
            ["serve", "--ends-with-input", "--links", "hislip", "--device", "W1200-0001", "--pace", "5",
                "--write-bench", file]);
        await _bench.Line(line => line == "ready");
        Workplace.MakePatient(file);
        return file;
    }

    private Task<Finished> Run(string bench) => _place.Run(
        "run", Workplace.Sequence, "--bench", bench, "--operator", "A", "--armed-by", "A", "--device", "W1200-0001",
        "--evidence", _place.Evidence);

    /// <summary>What another controller does: a session on the supply, and its exclusive lock.</summary>
    private static async Task<Socket[]> Lock(string file)
    {
        string line = (await File.ReadAllLinesAsync(file)).Single(l => l.StartsWith("  supply:", StringComparison.Ordinal));
        const string Mark = "hislip 127.0.0.1:";
        string from = line[(line.IndexOf(Mark, StringComparison.Ordinal) + Mark.Length)..];
        int port = int.Parse(from[..from.IndexOf('\'', StringComparison.Ordinal)], CultureInfo.InvariantCulture);
        Socket synchronous = await Connect(port);
        byte[] session = await Ask(synchronous, 0, 0, 0x0100_5858);
        Socket asynchronous = await Connect(port);
        await Ask(asynchronous, 17, 0, BinaryPrimitives.ReadUInt16BigEndian(session.AsSpan(6)));
        byte[] locked = await Ask(asynchronous, 4, 1, 0);
        Assert.Equal((5, 1), (locked[2], locked[3]));
        return [synchronous, asynchronous];
    }

    private static async Task<Socket> Connect(int port)
    {
        var socket = new Socket(SocketType.Stream, ProtocolType.Tcp);
        await socket.ConnectAsync(IPAddress.Loopback, port);
        return socket;
    }

    private static async Task<byte[]> Ask(Socket socket, byte type, byte control, uint parameter)
    {
        byte[] message = new byte[16];
        (message[0], message[1], message[2], message[3]) = ((byte)'H', (byte)'S', type, control);
        BinaryPrimitives.WriteUInt32BigEndian(message.AsSpan(4), parameter);
        await socket.SendAsync(message);
        for (int filled = 0; filled < message.Length;)
        {
            filled += await socket.ReceiveAsync(message.AsMemory(filled));
        }

        return message;
    }
}
