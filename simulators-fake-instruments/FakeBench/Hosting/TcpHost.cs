using System.Globalization;
using System.Net;
using System.Net.Sockets;
using FakeBench.Instruments;
using FakeBench.Scpi;

namespace FakeBench.Hosting;

/// <summary>Serves one instrument over TCP on the loopback: one write a reply, no delay, a bounded number of
/// clients.</summary>
public sealed class TcpHost : IHost
{
    private readonly Instrument _instrument;
    private readonly TimeProvider _time;
    private readonly int _mostClients;
    private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
    private readonly CancellationTokenSource _stop = new();
    private readonly Task _accepting;
    private int _clients;

    /// <summary>Starts to listen on a free port.</summary>
    /// <param name="instrument">The instrument.</param>
    /// <param name="mostClients">Clients served at once; one more is closed as soon as it connects.</param>
    /// <param name="time">The clock of late replies.</param>
    public TcpHost(Instrument instrument, int mostClients, TimeProvider time)
    {
        (_instrument, _mostClients, _time) = (instrument, mostClients, time);
        _listener.Start();
        Port = ((IPEndPoint)_listener.LocalEndpoint).Port;
        _accepting = Accept();
    }

    /// <summary>Its port.</summary>
    public int Port { get; }

    /// <inheritdoc/>
    public int Clients => Volatile.Read(ref _clients);

    /// <inheritdoc/>
    public string Link => string.Create(CultureInfo.InvariantCulture, $"tcp 127.0.0.1 {Port}");

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        await _stop.CancelAsync();
        _listener.Stop();
        await _accepting;
        _listener.Dispose();
        _stop.Dispose();
    }

    private async Task Accept()
    {
        var serving = new List<Task>();
        try
        {
            while (true)
            {
                Socket client = await _listener.AcceptSocketAsync(_stop.Token);
                serving.RemoveAll(task => task.IsCompleted);
                if (Interlocked.Increment(ref _clients) > _mostClients)
                {
                    client.Dispose();
                    Interlocked.Decrement(ref _clients);
                    continue;
                }

                serving.Add(Task.Run(() => Serve(client)));
            }
        }
        catch (Exception end) when (end is OperationCanceledException or SocketException or InvalidOperationException)
        {
            // Stopped while it waited, or before it could wait again.
            await Task.WhenAll(serving);
        }
    }

    private async Task Serve(Socket client)
    {
        try
        {
            client.NoDelay = true;
            await Converse(client);
        }
        catch (Exception end) when (end is OperationCanceledException or SocketException)
        {
            // The client went away, or the bench ends: either way this conversation is over.
        }
        finally
        {
            client.Dispose();
            Interlocked.Decrement(ref _clients);
        }
    }

    private async Task Converse(Socket client)
    {
        int boots = _instrument.Boots;
        var framer = new MessageFramer();
        byte[] buffer = new byte[8192];
        while (true)
        {
            int count = await client.ReceiveAsync(buffer, _stop.Token);
            if (count == 0)
            {
                return;
            }

            foreach (string? message in framer.Take(buffer.AsSpan(0, count)))
            {
                Answer answer = _instrument.Obey(message);
                if (answer.Deaf)
                {
                    await Task.Delay(Timeout.InfiniteTimeSpan, _time, _stop.Token);
                }

                if (!await Reply(client, _instrument.Boots == boots ? answer : answer with { CutShort = true }))
                {
                    return;
                }
            }
        }
    }

    private async Task<bool> Reply(Socket client, Answer answer)
    {
        if (answer.Late > TimeSpan.Zero)
        {
            await Task.Delay(answer.Late, _time, _stop.Token);
        }

        int length = answer.CutShort ? answer.Bytes.Length / 2 : answer.Bytes.Length;
        ReadOnlyMemory<byte> rest = answer.Bytes.AsMemory(0, length);
        while (!rest.IsEmpty)
        {
            ReadOnlyMemory<byte> piece = answer.Piece > 0 ? rest[..Math.Min(answer.Piece, rest.Length)] : rest;
            rest = rest[await client.SendAsync(piece, _stop.Token)..];
            if (answer.Piece > 0)
            {
                await Task.Delay(answer.Gap, _time, _stop.Token);
            }
        }

        if (answer.CutShort)
        {
            client.LingerState = new LingerOption(true, 0);
        }

        return !answer.CutShort;
    }
}
