using System.Globalization;
using System.Net;
using System.Net.Sockets;
using System.Text;
using FakeBench.Hosting.Hislip;

namespace FakeBench.Tests.Hosting.Hislip;

/// <summary>A plain client of a HiSLIP server: frames out, frames in, every wait bounded.</summary>
internal sealed class HislipClient : IDisposable
{
    private readonly CancellationTokenSource _patience = new(TimeSpan.FromSeconds(60));
    private readonly string _link;

    private HislipClient(string link) => _link = link;

    public Socket Synchronous { get; private set; } = null!;

    public Socket Asynchronous { get; private set; } = null!;

    public static async Task<HislipClient> Connect(string link)
    {
        var client = new HislipClient(link);
        client.Synchronous = await client.Open();
        Frame response = await client.Ask(
            client.Synchronous, new Frame(Kind.Initialize, 0, 0x0100_5858, "hislip0"u8.ToArray()));
        Assert.Equal((Kind.InitializeResponse, 0x0100u), (response.Kind, response.Parameter >> 16));
        client.Asynchronous = await client.Open();
        Frame joined = await client.Ask(
            client.Asynchronous, new Frame(Kind.AsyncInitialize, 0, response.Parameter & 0xffff, []));
        Assert.Equal(Kind.AsyncInitializeResponse, joined.Kind);
        return client;
    }

    public async Task<Socket> Open()
    {
        var socket = new Socket(SocketType.Stream, ProtocolType.Tcp) { NoDelay = true };
        int port = int.Parse(_link.AsSpan(_link.LastIndexOf(':') + 1), CultureInfo.InvariantCulture);
        await socket.ConnectAsync(IPAddress.Loopback, port);
        return socket;
    }

    public Task Say(uint id, string text, byte control = 0, byte kind = Kind.DataEnd) =>
        Send(Synchronous, new Frame(kind, control, id, Encoding.Latin1.GetBytes(text)).ToBytes());

    public async Task<string> Heard(uint id)
    {
        Frame frame = await Next(Synchronous);
        Assert.Equal((Kind.DataEnd, id), (frame.Kind, frame.Parameter));
        return Encoding.Latin1.GetString(frame.Payload);
    }

    public Task<Frame> Request(byte kind, byte control = 0, uint parameter = 0, string payload = "") =>
        Ask(Asynchronous, new Frame(kind, control, parameter, Encoding.Latin1.GetBytes(payload)));

    public async Task<Frame> Ask(Socket socket, Frame frame)
    {
        await Send(socket, frame.ToBytes());
        return await Next(socket);
    }

    public static async Task Send(Socket socket, byte[] bytes) => await socket.SendAsync(bytes);

    public async Task<Frame> Next(Socket socket) =>
        await Frame.Receive(socket, _patience.Token) ?? throw new IOException("the server closed the channel");

    /// <summary>Whether the server closes the channel.</summary>
    public async Task<bool> IsClosed(Socket socket)
    {
        try
        {
            return await socket.ReceiveAsync(new byte[1], _patience.Token) == 0;
        }
        catch (SocketException)
        {
            return true;
        }
    }

    public void Dispose()
    {
        Synchronous.Dispose();
        Asynchronous?.Dispose();
        _patience.Dispose();
    }
}
