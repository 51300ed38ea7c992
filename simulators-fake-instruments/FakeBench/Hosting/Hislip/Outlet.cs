using System.Net.Sockets;

namespace FakeBench.Hosting.Hislip;

/// <summary>The way out of one channel: whole messages, one at a time, whoever sends them.</summary>
public sealed class Outlet(Socket socket) : IDisposable
{
    private readonly SemaphoreSlim _turn = new(1, 1);

    /// <summary>Sends a message.</summary>
    public async Task Send(Frame frame, CancellationToken stop)
    {
        await _turn.WaitAsync(stop);
        try
        {
            ReadOnlyMemory<byte> rest = frame.ToBytes();
            while (!rest.IsEmpty)
            {
                rest = rest[await socket.SendAsync(rest, stop)..];
            }
        }
        finally
        {
            _turn.Release();
        }
    }

    /// <summary>Closes the channel.</summary>
    /// <param name="abruptly">Whether by a reset.</param>
    public void Close(bool abruptly = false)
    {
        if (abruptly)
        {
            socket.LingerState = new LingerOption(true, 0);
        }

        socket.Dispose();
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        socket.Dispose();
        _turn.Dispose();
    }
}
