using System.Buffers.Binary;
using System.Net;
using System.Net.Sockets;

namespace BenchRunner.Benchmarks;

/// <summary>The far side of a link, as bare as can be: it answers a question with bytes that are ready, over a raw
/// socket or in HiSLIP frames. The same one serves floor and ours.</summary>
/// <remarks>A thread a connection, blocking calls: its cost is the same whoever asks.</remarks>
internal sealed class BareServer : IDisposable
{
    private const int Head = 16;
    private static readonly byte[] _longest = [0, 0, 0, 0, 0, 16, 0, 0];

    private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
    private readonly List<Socket> _sockets = [];
    private readonly List<(byte[] Question, byte[] Reply)> _answers = [];
    private readonly bool _isHislip;

    /// <summary>Starts to listen.</summary>
    /// <param name="isHislip">Whether it speaks HiSLIP.</param>
    public BareServer(bool isHislip = false)
    {
        _isHislip = isHislip;
        Answer("*IDN?", "BENCHRUNNER,BARE,0,1\n"u8.ToArray());
        Answer("SYSTem:ERRor?", "0,\"No error\"\n"u8.ToArray());
        _listener.Start();
        Background(Accept);
    }

    /// <summary>Its port.</summary>
    public int Port => ((IPEndPoint)_listener.LocalEndpoint).Port;

    /// <summary>Whether an answer goes out in segments of one byte each.</summary>
    public bool Trickles { get; set; }

    /// <summary>What a question is answered with.</summary>
    public void Answer(string question, byte[] answer) =>
        _answers.Add((System.Text.Encoding.ASCII.GetBytes(question), answer));

    /// <summary>A definite length block of so many bytes, its newline included.</summary>
    public static byte[] Block(int length)
    {
        byte[] head = System.Text.Encoding.ASCII.GetBytes(FormattableString.Invariant($"#8{length:D8}"));
        byte[] block = new byte[head.Length + length + 1];
        head.CopyTo(block, 0);
        for (int i = 0; i < length; i++)
        {
            block[head.Length + i] = (byte)(i * 31);
        }

        block[^1] = (byte)'\n';
        return block;
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        _listener.Stop();
        lock (_sockets)
        {
            _sockets.ForEach(socket => socket.Dispose());
        }
    }

    private static void Background(Action work) => new Thread(() =>
    {
        try
        {
            work();
        }
        catch (Exception e) when (e is SocketException or ObjectDisposedException)
        {
            // The client has gone, or the group is over.
        }
    })
    { IsBackground = true }.Start();

    private static bool Fill(Socket socket, Span<byte> buffer)
    {
        while (buffer.Length > 0)
        {
            int count = socket.Receive(buffer);
            if (count == 0)
            {
                return false;
            }

            buffer = buffer[count..];
        }

        return true;
    }

    private void Accept()
    {
        while (true)
        {
            Socket socket = _listener.AcceptSocket();
            socket.NoDelay = true;
            lock (_sockets)
            {
                _sockets.Add(socket);
            }

            Background(() => Talk(socket));
        }
    }

    private void Talk(Socket socket)
    {
        if (_isHislip)
        {
            TalkHislip(socket);
            return;
        }

        byte[] buffer = new byte[4096];
        int filled = 0;
        while (socket.Receive(buffer.AsSpan(filled)) is > 0 and int count)
        {
            filled += count;
            int start = 0;
            while (buffer.AsSpan(start, filled - start).IndexOf((byte)'\n') is >= 0 and int length)
            {
                Send(socket, Find(buffer.AsSpan(start, length)));
                start += length + 1;
            }

            buffer.AsSpan(start, filled - start).CopyTo(buffer);
            filled -= start;
        }
    }

    private void TalkHislip(Socket socket)
    {
        byte[] message = new byte[4096];
        while (Fill(socket, message.AsSpan(0, Head)))
        {
            int length = (int)BinaryPrimitives.ReadUInt64BigEndian(message.AsSpan(8));
            if (!Fill(socket, message.AsSpan(Head, length)))
            {
                return;
            }

            // The kinds of IVI-6.1 that a session needs, by their numbers: the start, the longest message, data.
            switch (message[2])
            {
                case 0:
                    Frame(socket, 1, message, []);
                    break;
                case 17:
                    Frame(socket, 18, message, []);
                    break;
                case 15:
                    Frame(socket, 16, message, _longest);
                    break;
                case 7 when Find(message.AsSpan(Head, length).TrimEnd((byte)'\n')) is { Length: > 0 } reply:
                    Frame(socket, 7, message, reply);
                    break;
            }
        }
    }

    private void Frame(Socket socket, byte kind, byte[] request, byte[] payload)
    {

        Span<byte> head = stackalloc byte[Head];
        request.AsSpan(0, Head).CopyTo(head);
        head[2] = kind;
        head[3] = 0;
        if (kind == 1)
        {
            BinaryPrimitives.WriteUInt32BigEndian(head[4..], 0x0100_0001);
        }

        BinaryPrimitives.WriteUInt64BigEndian(head[8..], (ulong)payload.Length);
        Send(socket, head);
        Send(socket, payload);
    }

    // Allocates nothing: what is allocated while it answers is the client's.
    private byte[] Find(ReadOnlySpan<byte> question)
    {
        foreach ((byte[] asked, byte[] reply) in _answers)
        {
            if (question.SequenceEqual(asked))
            {
                return reply;
            }
        }

        return [];
    }

    private void Send(Socket socket, ReadOnlySpan<byte> bytes)
    {
        while (bytes.Length > 0)
        {
            bytes = bytes[socket.Send(Trickles ? bytes[..1] : bytes)..];
        }
    }
}
