using System.Net;
using System.Net.Sockets;
using System.Text;
using BenchRunner.Instruments.Links;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>Stands before one instrument and gives it another name: a real one among simulated ones.</summary>
internal sealed class Disguise : IDisposable
{
    private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
    private readonly LinkAddress _behind;
    private readonly CancellationTokenSource _end = new();

    public Disguise(string link)
    {
        _behind = LinkAddress.Parse(link);
        _listener.Start();
        _ = Serve();
    }

    public string Link => $"tcp 127.0.0.1 {((IPEndPoint)_listener.LocalEndpoint).Port}";

    public void Dispose()
    {
        _end.Cancel();
        _listener.Dispose();
        _end.Dispose();
    }

    private async Task Serve()
    {
        CancellationToken end = _end.Token;
        try
        {
            while (true)
            {
                TcpClient client = await _listener.AcceptTcpClientAsync(end);
                _ = Between(client, end);
            }
        }
        catch (Exception over) when (over is OperationCanceledException or SocketException or ObjectDisposedException)
        {
            // The test is over.
        }
    }

    private async Task Between(TcpClient client, CancellationToken end)
    {
        using (client)
        using (var instrument = new TcpClient())
        {
            await instrument.ConnectAsync(_behind.Host, _behind.Number, end);
            await Task.WhenAny(
                Pass(client.GetStream(), instrument.GetStream(), text => text, end),
                Pass(instrument.GetStream(), client.GetStream(), Renamed, end));
        }
    }

    private static string Renamed(string reply) => reply.Replace("FAKEBENCH", "REAL", StringComparison.Ordinal);

    private static async Task Pass(
        NetworkStream from, NetworkStream to, Func<string, string> change, CancellationToken end)
    {
        using var lines = new StreamReader(from, Encoding.Latin1, leaveOpen: true);
        while (await lines.ReadLineAsync(end) is { } line)
        {
            await to.WriteAsync(Encoding.Latin1.GetBytes(change(line) + "\n"), end);
        }
    }
}
