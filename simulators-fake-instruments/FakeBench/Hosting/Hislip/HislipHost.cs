using System.Collections.Concurrent;
using System.Globalization;
using System.Net;
using System.Net.Sockets;
using System.Text;
using FakeBench.Instruments;

namespace FakeBench.Hosting.Hislip;

/// <summary>Serves one instrument over HiSLIP (IVI-6.1, protocol version 1.0) on the loopback.</summary>
public sealed class HislipHost : IHost
{
    /// <summary>The one device that the server has.</summary>
    public const string SubAddress = "hislip0";

    private readonly Instrument _instrument;
    private readonly ServerTerms _terms;
    private readonly TimeProvider _time;
    private readonly LockDesk _desk = new();
    private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
    private readonly ConcurrentDictionary<ushort, Session> _sessions = new();
    private readonly CancellationTokenSource _stop = new();
    private readonly Task _accepting;
    private int _lastId;
    private int _clients;

    /// <summary>Starts to listen on a free port.</summary>
    /// <param name="instrument">The instrument.</param>
    /// <param name="terms">What servers differ in.</param>
    /// <param name="time">The clock of late replies and of waiting for locks.</param>
    public HislipHost(Instrument instrument, ServerTerms terms, TimeProvider time)
    {
        (_instrument, _terms, _time) = (instrument, terms, time);
        _listener.Start();
        _accepting = Accept();
    }

    /// <inheritdoc/>
    public int Clients => Volatile.Read(ref _clients);

    /// <inheritdoc/>
    public string Link => string.Create(
        CultureInfo.InvariantCulture, $"hislip 127.0.0.1:{((IPEndPoint)_listener.LocalEndpoint).Port}");

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
                serving.Add(Task.Run(() => Serve(client)));
            }
        }
        catch (Exception end) when (end is OperationCanceledException or SocketException or InvalidOperationException)
        {
            // Stopped while it waited, or before it could wait again.
            await Task.WhenAll(serving);
        }
    }

    private async Task Serve(Socket socket)
    {
        try
        {
            socket.NoDelay = true;
            await Start(socket);
        }
        catch (Exception end) when (end
            is OperationCanceledException or SocketException or ObjectDisposedException)
        {
            // The client went away, the other channel closed this one, or the bench ends.
        }
        finally
        {
            socket.Dispose();
        }
    }

    private async Task Start(Socket socket)
    {
        using var welcome = new Outlet(socket);
        try
        {
            switch (await Frame.Receive(socket, _stop.Token))
            {
                case null:
                    break;
                case { Kind: Kind.Initialize } first:
                    await Open(first, socket);
                    break;
                case { Kind: Kind.AsyncInitialize } first:
                    await Join(first, socket);
                    break;
                default:
                    throw TroubleException.BadStart();
            }
        }
        catch (TroubleException fatal)
        {
            await welcome.Send(fatal.Answer, _stop.Token);
        }
    }

    private async Task Open(Frame first, Socket socket)
    {
        string wanted = Encoding.Latin1.GetString(first.Payload);
        if ((wanted.Length > 0 && wanted != SubAddress) || first.Parameter >> 24 == 0)
        {
            throw TroubleException.BadStart();
        }

        if (Interlocked.Increment(ref _clients) > _terms.MostClients)
        {
            Interlocked.Decrement(ref _clients);
            throw TroubleException.Full();
        }

        ushort id = (ushort)Interlocked.Increment(ref _lastId);
        using var session = new Session(id, socket, _instrument, _desk, _terms, _time);
        _sessions[id] = session;
        try
        {
            await session.Serve(_stop.Token);
        }
        finally
        {
            _sessions.TryRemove(id, out _);
            Interlocked.Decrement(ref _clients);
        }
    }

    private async Task Join(Frame first, Socket socket)
    {
        if (!_sessions.TryGetValue((ushort)first.Parameter, out Session? session))
        {
            throw TroubleException.BadStart();
        }

        using var channel = new AsyncChannel(socket, session, _instrument, _desk, _terms, _time);
        if (!session.Join(channel))
        {
            throw TroubleException.BadStart();
        }

        // One channel less is no session.
        using (session)
        {
            await channel.Serve(_stop.Token);
        }
    }
}
