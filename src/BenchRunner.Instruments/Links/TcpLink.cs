using System.Runtime.CompilerServices;

namespace BenchRunner.Instruments.Links;

/// <summary>A link over a stream socket.</summary>
internal sealed class TcpLink : ILink
{
    private readonly Lock _writing = new();
    private readonly StreamSocket _socket;

    private TcpLink(string name, StreamSocket socket) => (Name, _socket) = (name, socket);

    public string Name { get; }

    public bool HasInput
    {
        get
        {
            try
            {
                return _socket.HasInput;
            }
            catch (Exception e) when (StreamSocket.IsLoss(e))
            {
                throw StreamSocket.Lost(Name, e);
            }
        }
    }

    public static Task<ILink> Open(
        LinkAddress address, TimeSpan connectWithin, TimeSpan writeWithin, TimeProvider time, CancellationToken cancel)
    {
        var name = address.ToString();
        return StreamSocket.Within<ILink>(
            name,
            connectWithin,
            async token => new TcpLink(name, await StreamSocket.Connect(address, writeWithin, token)),
            time,
            cancel);
    }

    public void Write(ReadOnlySpan<byte> message)
    {
        lock (_writing)
        {
            try
            {
                _socket.SendAll(message);
            }
            catch (Exception e) when (StreamSocket.IsLoss(e))
            {
                throw StreamSocket.Lost(Name, e);
            }
        }
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel)
    {
        try
        {
            return await _socket.Receive(buffer, cancel);
        }
        catch (Exception e) when (StreamSocket.IsLoss(e))
        {
            throw StreamSocket.Lost(Name, e);
        }
    }

    public void Dispose() => _socket.Dispose();
}
