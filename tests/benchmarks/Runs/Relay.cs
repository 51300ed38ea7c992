using System.Net;
using System.Net.Sockets;

namespace BenchRunner.Benchmarks;

/// <summary>A link that can fail: between the program and one instrument.</summary>
internal sealed class Relay : IDisposable
{
    private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
    private readonly List<Socket> _sockets = [];
    private readonly int _to;
    private readonly Action<bool, byte[]>? _heard;
    private volatile bool _silent;

    /// <summary>Starts it.</summary>
    /// <param name="to">Port of the instrument.</param>
    /// <param name="heard">Takes what passes, before it does: whether the instrument said it, and the bytes.</param>
    public Relay(int to, Action<bool, byte[]>? heard = null)
    {
        (_to, _heard) = (to, heard);
        _listener.Start();
        new Thread(Accept) { IsBackground = true }.Start();
    }

    /// <summary>Its own port.</summary>
    public int Port => ((IPEndPoint)_listener.LocalEndpoint).Port;

    /// <summary>From now on no answer comes through.</summary>
    public void Silence() => _silent = true;

    /// <summary>Cuts every connection; new ones are taken.</summary>
    public void Cut()
    {
        lock (_sockets)
        {
            _sockets.ForEach(socket => socket.Dispose());
            _sockets.Clear();
        }
    }

    public void Dispose()
    {
        _listener.Dispose();
        Cut();
    }

    private void Accept()
    {
        try
        {
            while (true)
            {
                Socket near = _listener.AcceptSocket();
                var far = new Socket(SocketType.Stream, ProtocolType.Tcp) { NoDelay = true };
                near.NoDelay = true;
                far.Connect(IPAddress.Loopback, _to);
                lock (_sockets)
                {
                    _sockets.AddRange([near, far]);
                }

                new Thread(() => Pump(near, far, isAnswer: false)) { IsBackground = true }.Start();
                new Thread(() => Pump(far, near, isAnswer: true)) { IsBackground = true }.Start();
            }
        }
        catch (Exception over) when (over is SocketException or ObjectDisposedException)
        {
            // The trial is over.
        }
    }

    private void Pump(Socket from, Socket to, bool isAnswer)
    {
        byte[] buffer = new byte[1 << 16];
        try
        {
            while (from.Receive(buffer) is > 0 and int count)
            {
                _heard?.Invoke(isAnswer, buffer[..count]);
                if (!(isAnswer && _silent))
                {
                    to.Send(buffer.AsSpan(0, count));
                }
            }
        }
        catch (Exception over) when (over is SocketException or ObjectDisposedException)
        {
            // One side has gone; so does the other.
        }

        from.Dispose();
        to.Dispose();
    }
}
