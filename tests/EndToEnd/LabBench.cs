using System.Net;
using System.Net.Sockets;
using System.Text;

namespace EndToEnd;

/// <summary>A fake bench behind relays that take FAKEBENCH out of its answers: to the program it is a real
/// one.</summary>
/// <remarks>Only so can a test meet the confirmation that simulated benches are not asked for. Nothing is
/// energised.</remarks>
internal sealed class LabBench : IDisposable
{
    private static readonly byte[] Told = "FAKEBENCH"u8.ToArray();
    private static readonly byte[] Heard = "LABBENCH0"u8.ToArray();
    private readonly List<TcpListener> _listeners = [];
    private readonly CancellationTokenSource _end = new();
    private Started _bench = null!;

    /// <summary>The bench file.</summary>
    public required string File { get; init; }

    /// <summary>Starts the bench.</summary>
    /// <param name="place">Where its files go.</param>
    /// <param name="options">Further options of <c>serve</c>, e.g. <c>--exchange by-hand</c>.</param>
    public static async Task<LabBench> Start(Workplace place, params string[] options)
    {
        string written = place.Path("written.yaml");
        Directory.CreateDirectory(place.Path("benches"));
        var lab = new LabBench { File = Path.Combine(place.Path("benches"), "lab.yaml") };
        lab._bench = place.Start(
            Workplace.FakeBench,
            ["serve", "--ends-with-input", "--interlock", "tcp", "--device", "W1200-0001", "--pace", "5",
                "--write-bench", written, .. options]);
        await lab._bench.Line(line => line == "ready");
        var text = new StringBuilder();
        foreach (string line in await System.IO.File.ReadAllLinesAsync(written))
        {
            const string mark = "'tcp 127.0.0.1:";
            int at = line.IndexOf(mark, StringComparison.Ordinal);
            string own = line;
            if (at >= 0)
            {
                int start = at + mark.Length;
                int end = line.IndexOf('\'', start);
                int port = int.Parse(line[start..end], System.Globalization.CultureInfo.InvariantCulture);
                own = line[..start] + lab.Relay(port) + line[end..];
            }

            text.Append(own.Replace("FAKEBENCH", "LABBENCH0", StringComparison.Ordinal)).Append('\n');
        }

        await System.IO.File.WriteAllTextAsync(lab.File, text.ToString());
        Workplace.MakePatient(lab.File);
        return lab;
    }

    /// <summary>Does something at the fixture, e.g. <c>open</c>.</summary>
    public async Task Hands(string hand)
    {
        await _bench.Input.WriteLineAsync(hand);
        await _bench.Input.FlushAsync();
    }

    public void Dispose()
    {
        _end.Cancel();
        _listeners.ForEach(listener => listener.Dispose());
        _bench.Dispose();
        _end.Dispose();
    }

    private int Relay(int port)
    {
        var listener = new TcpListener(IPAddress.Loopback, 0);
        listener.Start();
        _listeners.Add(listener);
        _ = Accept(listener, port);
        return ((IPEndPoint)listener.LocalEndpoint).Port;
    }

    private async Task Accept(TcpListener listener, int port)
    {
        try
        {
            while (true)
            {
                TcpClient near = await listener.AcceptTcpClientAsync(_end.Token);
                var far = new TcpClient { NoDelay = true };
                near.NoDelay = true;
                await far.ConnectAsync(IPAddress.Loopback, port, _end.Token);
                _ = Pump(near, far, rename: false);
                _ = Pump(far, near, rename: true);
            }
        }
        catch (Exception over) when (over is OperationCanceledException or SocketException or ObjectDisposedException)
        {
            // The test is over.
        }
    }

    private async Task Pump(TcpClient from, TcpClient to, bool rename)
    {
        try
        {
            var buffer = new byte[1 << 16];
            int count;
            while ((count = await from.GetStream().ReadAsync(buffer, _end.Token)) > 0)
            {
                int at = rename ? buffer.AsSpan(0, count).IndexOf(Told) : -1;
                if (at >= 0)
                {
                    Heard.CopyTo(buffer, at);
                }

                await to.GetStream().WriteAsync(buffer.AsMemory(0, count), _end.Token);
            }
        }
        catch (Exception over) when (over
            is IOException or OperationCanceledException or ObjectDisposedException or InvalidOperationException)
        {
            // One side has gone; so does the other.
        }

        from.Dispose();
        to.Dispose();
    }
}
