using System.Collections.Concurrent;
using System.Net;
using System.Net.Sockets;
using System.Text;
using BenchRunner.Instruments.Links;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>An instrument that does not keep to the standard: it takes messages by its own terminator only, and what it
/// answers is bytes, terminator and all. On a real socket, or at the far end of a real pseudo terminal.</summary>
internal sealed class OddInstrument : IDisposable
{
    private readonly string _terminator;
    private readonly Func<string, string> _answer;
    private readonly ConcurrentQueue<string> _received = new();
    private readonly TcpListener? _listener;
    private readonly Terminal? _terminal;

    private OddInstrument(string terminator, Func<string, string> answer, bool isSerial)
    {
        (_terminator, _answer) = (terminator, answer);
        if (isSerial)
        {
            _terminal = new Terminal();
            Address = LinkAddress.Parse($"serial {_terminal.Path}");
            new Thread(() => Talk(_terminal.Read, b => _terminal.Write(b))) { IsBackground = true }.Start();
            return;
        }

        _listener = new TcpListener(IPAddress.Loopback, 0);
        _listener.Start();
        Address = LinkAddress.Parse($"tcp 127.0.0.1 {((IPEndPoint)_listener.LocalEndpoint).Port}");
        new Thread(Serve) { IsBackground = true }.Start();
    }

    public LinkAddress Address { get; }

    public string[] Received => [.. _received];

    public static OddInstrument OnSocket(string terminator, Func<string, string> answer) =>
        new(terminator, answer, isSerial: false);

    /// <summary>It ends when it is told BYE: a thread that waits on a pseudo terminal cannot be woken otherwise.</summary>
    public static OddInstrument OnTerminal(string terminator, Func<string, string> answer) =>
        new(terminator, answer, isSerial: true);

    public void Dispose()
    {
        _listener?.Dispose();
        _terminal?.Dispose();
    }

    private void Serve()
    {
        try
        {
            while (true)
            {
                TcpClient client = _listener!.AcceptTcpClient();
                client.NoDelay = true;
                NetworkStream stream = client.GetStream();
                new Thread(() => Talk(b => stream.Read(b), b => stream.Write(b))) { IsBackground = true }.Start();
            }
        }
        catch (Exception e) when (e is SocketException or InvalidOperationException)
        {
            // The test is over.
        }
    }

    private void Talk(Func<byte[], int> read, Action<byte[]> write)
    {
        var buffer = new byte[256];
        var held = "";
        try
        {
            while (read(buffer) is > 0 and var count)
            {
                held += Encoding.Latin1.GetString(buffer, 0, count);
                while (held.IndexOf(_terminator, StringComparison.Ordinal) is >= 0 and var end)
                {
                    var line = held[..end];
                    held = held[(end + _terminator.Length)..];
                    _received.Enqueue(line);
                    if (line == "BYE")
                    {
                        return;
                    }

                    write(Encoding.Latin1.GetBytes(_answer(line)));
                }
            }
        }
        catch (Exception e) when (e is IOException or ObjectDisposedException)
        {
            // The client has gone, or the test is over.
        }
    }
}
