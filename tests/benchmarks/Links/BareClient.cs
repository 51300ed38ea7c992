using System.Net;
using System.Net.Sockets;

namespace BenchRunner.Benchmarks;

/// <summary>The floor of a link: one blocking send, and a receive loop into one buffer that is there already.</summary>
internal sealed class BareClient : IDisposable
{
    private readonly Socket _socket = new(SocketType.Stream, ProtocolType.Tcp) { NoDelay = true };
    private readonly byte[] _buffer;

    /// <summary>Connects.</summary>
    /// <param name="port">The server's port on the loopback.</param>
    /// <param name="longest">The longest reply, bytes.</param>
    public BareClient(int port, int longest)
    {
        _buffer = new byte[longest];
        _socket.Connect(IPAddress.Loopback, port);
    }

    /// <summary>Sends a message and receives a reply of a length that is known.</summary>
    public void Exchange(ReadOnlySpan<byte> message, int length)
    {
        _socket.Send(message);
        for (int filled = 0; filled < length;)
        {
            filled += _socket.Receive(_buffer.AsSpan(filled, length - filled));
        }
    }

    /// <inheritdoc/>
    public void Dispose() => _socket.Dispose();
}
