using System.Buffers.Binary;
using System.Globalization;
using System.Net;
using System.Net.Sockets;

namespace EndToEnd;

/// <summary>A fake bench over HiSLIP, and another controller of it (IVI-6.1, 6.5).</summary>
internal sealed class HislipBench : IDisposable
{
    private readonly Started _bench;
    private readonly List<Socket> _other = [];

    private HislipBench(Started bench, string file) => (_bench, File) = (bench, file);

    /// <summary>The bench file.</summary>
    public string File { get; }

    /// <summary>Starts the bench.</summary>
    public static async Task<HislipBench> Start(Workplace place)
    {
        string file = place.Path("hislip.yaml");
        Started bench = place.Start(
            Workplace.FakeBench,
            ["serve", "--ends-with-input", "--links", "hislip", "--device", "W1200-0001", "--pace", "5",
                "--write-bench", file]);
        await bench.Line(line => line == "ready");
        Workplace.MakePatient(file);
        return new HislipBench(bench, file);
    }

    /// <summary>What another controller does: a session on the supply, and its exclusive lock.</summary>
    public async Task LockSupply()
    {
        string line = (await System.IO.File.ReadAllLinesAsync(File)).Single(l => l.StartsWith("  supply:", StringComparison.Ordinal));
        const string Mark = "hislip 127.0.0.1:";
        string from = line[(line.IndexOf(Mark, StringComparison.Ordinal) + Mark.Length)..];
        int port = int.Parse(from[..from.IndexOf('\'', StringComparison.Ordinal)], CultureInfo.InvariantCulture);
        Socket synchronous = await Connect(port);
        _other.Add(synchronous);
        byte[] session = await Ask(synchronous, 0, 0, 0x0100_5858);
        Socket asynchronous = await Connect(port);
        _other.Add(asynchronous);
        await Ask(asynchronous, 17, 0, BinaryPrimitives.ReadUInt16BigEndian(session.AsSpan(6)));
        byte[] locked = await Ask(asynchronous, 4, 1, 0);
        Assert.Equal((5, 1), (locked[2], locked[3]));
    }

    public void Dispose()
    {
        _other.ForEach(socket => socket.Dispose());
        _bench.Dispose();
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
