using System.Net.Sockets;
using System.Runtime.CompilerServices;

namespace BenchRunner.Instruments.Links;

/// <summary>A link over a stream socket.</summary>
internal sealed class TcpLink : ILink
{
    // An instrument whose plug was pulled shows on an idle socket only by keep-alive: after 5 s, then 3 probes of 1 s.
    private const int KeepAliveAfter = 5;
    private const int KeepAliveEvery = 1;
    private const int KeepAliveProbes = 3;

    private readonly Lock _writing = new();
    private readonly TcpClient _client;
    private readonly Socket _socket;

    private TcpLink(string name, TcpClient client)
    {
        Name = name;
        _client = client;
        _socket = client.Client;
    }

    public string Name { get; }

    public bool HasInput
    {
        get
        {
            try
            {
                return _socket.Available > 0;
            }
            catch (Exception e) when (e is SocketException or ObjectDisposedException)
            {
                throw Lost(e);
            }
        }
    }

    public static async Task<ILink> Open(
        LinkAddress address, TimeSpan connectWithin, TimeSpan writeWithin, TimeProvider time, CancellationToken cancel)
    {
        var name = address.ToString();
        var client = new TcpClient();
        using var deadline = new CancellationTokenSource(connectWithin, time);
        using var either = CancellationTokenSource.CreateLinkedTokenSource(deadline.Token, cancel);
        try
        {
            await client.ConnectAsync(address.Host, address.Number, either.Token);

            // Without it a command followed by a query waits for the other side's delayed acknowledgement, 40 ms and
            // more.
            client.NoDelay = true;
            client.SendTimeout = (int)writeWithin.TotalMilliseconds;
            client.Client.SetSocketOption(SocketOptionLevel.Socket, SocketOptionName.KeepAlive, true);
            client.Client.SetSocketOption(SocketOptionLevel.Tcp, SocketOptionName.TcpKeepAliveTime, KeepAliveAfter);
            client.Client.SetSocketOption(SocketOptionLevel.Tcp, SocketOptionName.TcpKeepAliveInterval, KeepAliveEvery);
            client.Client.SetSocketOption(
                SocketOptionLevel.Tcp, SocketOptionName.TcpKeepAliveRetryCount, KeepAliveProbes);
            return new TcpLink(name, client);
        }
        catch (OperationCanceledException e) when (!cancel.IsCancellationRequested)
        {
            client.Dispose();
            throw new LinkException(
                name, $"no answer within {connectWithin.TotalSeconds:0.###} s; check power and address", e);
        }
        catch (SocketException e)
        {
            client.Dispose();
            throw new LinkException(name, $"cannot connect ({e.SocketErrorCode}); check that the instrument is on and "
                + $"its address right", e);
        }
        catch
        {
            client.Dispose();
            throw;
        }
    }

    public void Write(ReadOnlySpan<byte> message)
    {
        lock (_writing)
        {
            try
            {
                while (message.Length > 0)
                {
                    message = message[_socket.Send(message)..];
                }
            }
            catch (Exception e) when (e is SocketException or ObjectDisposedException)
            {
                throw Lost(e);
            }
        }
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel)
    {
        try
        {
            return await _socket.ReceiveAsync(buffer, cancel);
        }
        catch (Exception e) when (e is SocketException or ObjectDisposedException)
        {
            throw Lost(e);
        }
    }

    public void Dispose() => _client.Dispose();

    private LinkException Lost(Exception e) => new(
        Name, e is SocketException s ? $"connection lost ({s.SocketErrorCode})" : "connection closed", e);
}
