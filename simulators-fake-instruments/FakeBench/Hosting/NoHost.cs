using System.Globalization;
using System.Net;
using System.Net.Sockets;

namespace FakeBench.Hosting;

/// <summary>A port of the loopback at which nobody listens.</summary>
public sealed class NoHost : IHost
{
    /// <summary>Finds one: bound, so that nobody else takes it, and never listened at.</summary>
    public NoHost() => _bound.Bind(new IPEndPoint(IPAddress.Loopback, 0));

    private readonly Socket _bound = new(AddressFamily.InterNetwork, SocketType.Stream, ProtocolType.Tcp);

    /// <inheritdoc/>
    public string Link =>
        string.Create(CultureInfo.InvariantCulture, $"tcp 127.0.0.1 {((IPEndPoint)_bound.LocalEndPoint!).Port}");

    /// <inheritdoc/>
    public ValueTask DisposeAsync()
    {
        _bound.Dispose();
        return ValueTask.CompletedTask;
    }
}
