using System.Buffers.Binary;
using System.Collections.Concurrent;
using System.Net;
using System.Net.Sockets;
using System.Text;
using BenchRunner.Instruments.Links;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>A HiSLIP server of one client that does what a test says; shares no code with the client.</summary>
internal sealed class HislipPeer : IAsyncDisposable
{
    private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
    private readonly CancellationTokenSource _stop = new();
    private readonly ConcurrentQueue<Sent> _received = new();
    private readonly List<Socket> _sockets = [];
    private readonly Task _serving;

    public HislipPeer()
    {
        _listener.Start();
        _serving = Serve();
    }

    /// <summary>One message on the wire.</summary>
    public sealed record Sent(bool IsAsync, byte Type, byte Control, uint Parameter, byte[] Payload)
    {
        public string Text => Encoding.ASCII.GetString(Payload);
    }

    /// <summary>Parameter and control code of the InitializeResponse.</summary>
    public (byte Control, uint Parameter) Terms { get; init; } = (0, 0x0100_0007);

    /// <summary>The longest message taken, bytes, as sent; null: a payload of 4 bytes.</summary>
    public ulong? Longest { get; init; } = 1 << 20;

    /// <summary>Answer to a request for a lock.</summary>
    public byte Lock { get; init; } = 1;

    /// <summary>The status byte.</summary>
    public byte Status { get; set; }

    /// <summary>Answers a device clear on both channels.</summary>
    public bool Clears { get; set; } = true;

    /// <summary>Answers a message of the synchronous channel.</summary>
    public Func<HislipPeer, Sent, Task> On { get; set; } = (_, _) => Task.CompletedTask;

    public LinkAddress Address =>
        LinkAddress.Parse($"hislip 127.0.0.1:{((IPEndPoint)_listener.LocalEndpoint).Port}");

    public Sent[] Received => [.. _received];

    /// <summary>Client messages on the synchronous channel with data in them.</summary>
    public Sent[] Data => [.. _received.Where(s => !s.IsAsync && s.Type is 6 or 7)];

    public int Connections { get; private set; }

    public static byte[] Frame(byte type, byte control, uint parameter, ReadOnlySpan<byte> payload)
    {
        var bytes = new byte[16 + payload.Length];
        (bytes[0], bytes[1], bytes[2], bytes[3]) = ((byte)'H', (byte)'S', type, control);
        BinaryPrimitives.WriteUInt32BigEndian(bytes.AsSpan(4), parameter);
        BinaryPrimitives.WriteUInt64BigEndian(bytes.AsSpan(8), (ulong)payload.Length);
        payload.CopyTo(bytes.AsSpan(16));
        return bytes;
    }

    public Task Synchronous(byte type, byte control, uint parameter, string payload = "") =>
        Raw(0, Frame(type, control, parameter, Encoding.ASCII.GetBytes(payload)));

    public Task Asynchronous(byte type, byte control, uint parameter, string payload = "") =>
        Raw(1, Frame(type, control, parameter, Encoding.ASCII.GetBytes(payload)));

    /// <summary>A reply: one DataEnd.</summary>
    public Task Reply(Sent question, string text) => Synchronous(7, 0, question.Parameter, text);

    public async Task Raw(int channel, byte[] bytes) => await _sockets[(2 * (Connections - 1)) + channel].SendAsync(bytes);

    /// <summary>Ends both channels.</summary>
    public void HangUp() => _sockets.ForEach(s => s.Dispose());

    public async ValueTask DisposeAsync()
    {
        await _stop.CancelAsync();
        _listener.Stop();
        HangUp();
        await _serving;
        _stop.Dispose();
    }

    private async Task Serve()
    {
        try
        {
            while (true)
            {
                var synchronous = await Accept();
                _received.Enqueue((await Read(synchronous, false))!);
                await synchronous.SendAsync(Frame(1, Terms.Control, Terms.Parameter, []));
                var asynchronous = await Accept();
                Connections++;
                _ = Talk(synchronous, false);
                _ = Talk(asynchronous, true);
            }
        }
        catch (Exception e) when (e is OperationCanceledException or SocketException or InvalidOperationException)
        {
            // The test is over.
        }
    }

    private async Task<Socket> Accept()
    {
        var socket = await _listener.AcceptSocketAsync(_stop.Token);
        socket.NoDelay = true;
        _sockets.Add(socket);
        return socket;
    }

    private async Task Talk(Socket socket, bool isAsync)
    {
        try
        {
            while (await Read(socket, isAsync) is { } sent)
            {
                _received.Enqueue(sent);
                await (isAsync ? Request(sent) : Message(sent));
            }
        }
        catch (Exception e) when (e is OperationCanceledException or SocketException or ObjectDisposedException)
        {
            // The client has gone, or the test is over.
        }
    }

    private Task Message(Sent sent) => sent.Type == 8
        ? Clears ? Synchronous(9, 0, 0) : Task.CompletedTask
        : On(this, sent);

    private Task Request(Sent sent)
    {
        var longest = new byte[8];
        BinaryPrimitives.WriteUInt64BigEndian(longest, Longest ?? 0);
        return sent.Type switch
        {
            17 => Asynchronous(18, 0, 0x5A5A),
            15 => Raw(1, Frame(16, 0, 0, Longest is null ? longest[..4] : longest)),
            4 => Asynchronous(5, Lock, 0),
            21 => Asynchronous(22, Status, 0),
            19 when Clears => Asynchronous(23, (byte)(Terms.Control & 1), 0),
            _ => Task.CompletedTask,
        };
    }

    private async Task<Sent?> Read(Socket socket, bool isAsync)
    {
        var head = await Exactly(socket, 16);
        if (head is null)
        {
            return null;
        }

        var payload = await Exactly(socket, (int)BinaryPrimitives.ReadUInt64BigEndian(head.AsSpan(8)));
        return payload is null ? null : new Sent(
            isAsync, head[2], head[3], BinaryPrimitives.ReadUInt32BigEndian(head.AsSpan(4)), payload);
    }

    private async Task<byte[]?> Exactly(Socket socket, int length)
    {
        var bytes = new byte[length];
        for (var filled = 0; filled < length;)
        {
            var count = await socket.ReceiveAsync(bytes.AsMemory(filled), _stop.Token);
            if (count == 0)
            {
                return null;
            }

            filled += count;
        }

        return bytes;
    }
}
