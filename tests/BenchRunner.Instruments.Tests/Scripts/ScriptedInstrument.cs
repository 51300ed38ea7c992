using System.Collections.Concurrent;
using System.Globalization;
using System.Net;
using System.Net.Sockets;
using System.Text;
using BenchRunner.Instruments.Links;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>An instrument on a real socket that does what a test says, for what a real one does not do on
/// demand.</summary>
internal sealed class ScriptedInstrument : IAsyncDisposable
{
    private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
    private readonly CancellationTokenSource _stop = new();
    private readonly ConcurrentDictionary<string, Func<Visitor, Task>> _always = new();
    private readonly ConcurrentDictionary<string, ConcurrentQueue<Func<Visitor, Task>>> _once = new();
    private readonly ConcurrentQueue<string> _received = new();
    private readonly ConcurrentQueue<string> _errors = new();
    private readonly ConcurrentBag<TcpClient> _clients = [];
    private readonly Task _serving;
    private int _ese;
    private int _visits;

    public ScriptedInstrument(string identity = "MAKER,MODEL,1,1.0")
    {
        On("*IDN?", identity);
        On("*CLS", v => Done(_errors.Clear));
        On("SYSTem:ERRor?", v => v.Line(_errors.TryDequeue(out var error) ? error : "0,\"No error\""));
        _listener.Start();
        _serving = Serve();
    }

    public LinkAddress Address => LinkAddress.Parse($"tcp 127.0.0.1 {((IPEndPoint)_listener.LocalEndpoint).Port}");

    /// <summary>Every line that came, in order.</summary>
    public string[] Received => [.. _received];

    /// <summary>Connections taken so far.</summary>
    public int Visits => _visits;

    public int Count(string line) => Received.Count(l => l == line);

    public void On(string line, string reply) => _always[line] = v => v.Line(reply);

    public void On(string line, Func<Visitor, Task> act) => _always[line] = act;

    /// <summary>What is done the next time the line comes, before the usual is done again.</summary>
    public void Once(string line, Func<Visitor, Task> act) => _once.GetOrAdd(line, _ => new()).Enqueue(act);

    /// <summary>Puts an entry into the error queue.</summary>
    public void Fail(string entry) => _errors.Enqueue(entry);

    /// <summary>Somebody else, on a connection of his own, sends a command without a reply.</summary>
    public async Task Obey(string command)
    {
        using var other = new TcpClient();
        await other.ConnectAsync((IPEndPoint)_listener.LocalEndpoint);
        On("*OBEYED?", "1");
        await other.GetStream().WriteAsync(Encoding.ASCII.GetBytes(command + "\n*OBEYED?\n"));
        await other.GetStream().ReadExactlyAsync(new byte[2]);
    }

    /// <summary>A setting that is kept and read back, e.g. <c>VOLT</c>; <paramref name="kept"/> may change
    /// it.</summary>
    public void Keep(string set, string read, string initial, Func<string, string>? kept = null)
    {
        var value = initial;
        _always[set + " *"] = v => Done(() => value = kept is null ? v.Argument : kept(v.Argument));
        _always[read] = v => v.Line(value);
    }

    public static Task Done(Action act)
    {
        act();
        return Task.CompletedTask;
    }

    public async ValueTask DisposeAsync()
    {
        if (_stop.IsCancellationRequested)
        {
            return;
        }

        await _stop.CancelAsync();
        _listener.Stop();
        foreach (var client in _clients)
        {
            client.Dispose();
        }

        await _serving;
    }

    private async Task Serve()
    {
        try
        {
            while (true)
            {
                var client = await _listener.AcceptTcpClientAsync(_stop.Token);
                client.NoDelay = true;
                _clients.Add(client);
                _ = Talk(client, Interlocked.Increment(ref _visits));
            }
        }
        catch (Exception e) when (e is OperationCanceledException or SocketException or InvalidOperationException)
        {
            // The test is over.
        }
    }

    private async Task Talk(TcpClient client, int visit)
    {
        try
        {
            using var reader = new StreamReader(client.GetStream(), Encoding.ASCII);
            while (await reader.ReadLineAsync(_stop.Token) is { } line)
            {
                _received.Enqueue(line);
                await Answer(new Visitor(client, visit, line));
            }
        }
        catch (Exception e) when (e
            is OperationCanceledException or IOException or ObjectDisposedException or SocketException)
        {
            // The client has gone, or the test is over.
        }
    }

    private async Task Answer(Visitor visitor)
    {
        var line = visitor.Message;
        if (_once.TryGetValue(line, out var queue) && queue.TryDequeue(out var once))
        {
            await once(visitor);
        }
        else if (_always.TryGetValue(line, out var act) || _always.TryGetValue(line.Split(' ')[0] + " *", out act))
        {
            await act(visitor);
        }
        else if (line.Split(";:") is { Length: > 1 } units
            && units.All(u => _always.ContainsKey(u) || _once.TryGetValue(u, out var waiting) && !waiting.IsEmpty))
        {
            await Answer(visitor, units);
        }
        else if (line.StartsWith("*ESE ", StringComparison.Ordinal)
            && line.EndsWith(";*ESE?", StringComparison.Ordinal))
        {
            _ese = int.Parse(line.AsSpan()[5..^6], CultureInfo.InvariantCulture);
            await visitor.Line(_ese.ToString(CultureInfo.InvariantCulture));
        }
        else if (line.Length > 0)
        {
            Fail($"-113,\"Undefined header;{line}\"");
        }
    }

    /// <summary>Several units from the root in one message: their replies are one, joined by semicolons.</summary>
    private async Task Answer(Visitor visitor, string[] units)
    {
        var replies = new List<string>();
        foreach (var unit in units)
        {
            var part = visitor.For(unit);
            await Answer(part);
            replies.Add(part.Held);
        }

        await visitor.Line(string.Join(';', replies));
    }
}
