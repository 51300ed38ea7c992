using System.Net.Sockets;

namespace FakeBench.Hosting.Hislip;

/// <summary>The way out of one channel: whole messages, one at a time, whoever sends them.</summary>
public sealed class Outlet(Socket socket) : IDisposable
{
    private readonly SemaphoreSlim _turn = new(1, 1);

    /// <summary>Sends a message.</summary>
    public Task Send(Frame frame, CancellationToken stop) => Send(frame, int.MaxValue, static _ => Task.CompletedTask, stop);

    /// <summary>Sends a message in pieces.</summary>
    /// <param name="frame">The message.</param>
    /// <param name="piece">Bytes of a write.</param>
    /// <param name="pause">Waits after each.</param>
    /// <param name="stop">Ends it.</param>
    public async Task Send(Frame frame, int piece, Func<CancellationToken, Task> pause, CancellationToken stop)
    {
        await _turn.WaitAsync(stop);
        try
        {
            ReadOnlyMemory<byte> rest = frame.ToBytes();
            while (!rest.IsEmpty)
            {
                rest = rest[await socket.SendAsync(rest[..Math.Min(piece, rest.Length)], stop)..];
                await pause(stop);
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
