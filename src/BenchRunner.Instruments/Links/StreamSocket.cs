using System.Net;
using System.Net.Sockets;
using System.Runtime.CompilerServices;

namespace BenchRunner.Instruments.Links;

/// <summary>A stream socket as instruments need it: without delay, with a bound on each write, and with keep-alive. One
/// reader at a time.</summary>
internal sealed class StreamSocket : IDisposable
{
    // An instrument whose plug was pulled shows on an idle socket only by keep-alive: after 5 s, then 3 probes of 1 s.
    private const int KeepAliveAfter = 5;
    private const int KeepAliveEvery = 1;
    private const int KeepAliveProbes = 3;

    // The shortest that the system's poll can wait.
    private static readonly TimeSpan Moment = TimeSpan.FromMilliseconds(1);

    private readonly Socket _socket;
    private readonly Lookout _lookout;

    private StreamSocket(Socket socket) => (_socket, _lookout) = (socket, new Lookout(socket));

    /// <summary>Whether bytes wait to be read.</summary>
    /// <exception cref="SocketException">Lost.</exception>
    public bool HasInput => _socket.Available > 0;

    /// <summary>Connects, once.</summary>
    /// <param name="address">Where the instrument is.</param>
    /// <param name="writeWithin">How long a write may take.</param>
    /// <param name="cancel">Ends the attempt.</param>
    /// <exception cref="LinkException">Refused or unknown.</exception>
    public static async Task<StreamSocket> Connect(LinkAddress address, TimeSpan writeWithin, CancellationToken cancel)
    {
        // Without NoDelay a command followed by a query waits for the other side's delayed acknowledgement, 40 ms and
        // more.
        var socket = new Socket(SocketType.Stream, ProtocolType.Tcp)
        {
            NoDelay = true,
            SendTimeout = (int)writeWithin.TotalMilliseconds,
        };
        try
        {
            socket.SetSocketOption(SocketOptionLevel.Socket, SocketOptionName.KeepAlive, true);
            socket.SetSocketOption(SocketOptionLevel.Tcp, SocketOptionName.TcpKeepAliveTime, KeepAliveAfter);
            socket.SetSocketOption(SocketOptionLevel.Tcp, SocketOptionName.TcpKeepAliveInterval, KeepAliveEvery);
            socket.SetSocketOption(SocketOptionLevel.Tcp, SocketOptionName.TcpKeepAliveRetryCount, KeepAliveProbes);
            var hosts = await Dns.GetHostAddressesAsync(address.Host, cancel);

            // Blocking, and closed to end it: the framework's asynchronous way would watch the socket for good.
            using var givenUp = cancel.UnsafeRegister(static socket => ((Socket)socket!).Dispose(), socket);
            await Task.Run(() => socket.Connect(hosts, address.Number), CancellationToken.None);
            return new StreamSocket(socket);
        }
        catch (Exception e) when (IsLoss(e))
        {
            socket.Dispose();
            cancel.ThrowIfCancellationRequested();
            throw new LinkException(
                address.ToString(),
                $"cannot connect ({(e as SocketException)?.SocketErrorCode}); check that the instrument is on and its "
                    + "address right",
                e);
        }
        catch
        {
            socket.Dispose();
            throw;
        }
    }

    /// <summary>Hands all bytes to the system.</summary>
    /// <exception cref="SocketException">Lost, or not taken within the socket's bound.</exception>
    public void SendAll(ReadOnlySpan<byte> bytes)
    {
        while (bytes.Length > 0)
        {
            bytes = bytes[_socket.Send(bytes)..];
        }
    }

    /// <summary>Receives what comes next. What comes within a moment is waited for on the caller's thread: waking another
    /// one costs several round trips of a quick instrument.</summary>
    /// <returns>Bytes received; 0 where the other side has ended the stream.</returns>
    /// <exception cref="SocketException">Lost.</exception>
    /// <exception cref="OperationCanceledException">Cancelled; nothing was taken.</exception>
    public ValueTask<int> Receive(Memory<byte> buffer, CancellationToken cancel)
    {
        cancel.ThrowIfCancellationRequested();
        if (!_socket.Poll(Moment, SelectMode.SelectRead))
        {
            return ReceiveLater(buffer, cancel);
        }

        // What came as the deadline passed came too late.
        cancel.ThrowIfCancellationRequested();
        return ValueTask.FromResult(_socket.Receive(buffer.Span));
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        _socket.Dispose();
        _lookout.Dispose();
    }

    /// <summary>Whether an exception says that a socket is of no more use.</summary>
    public static bool IsLoss(Exception e) => e is SocketException or ObjectDisposedException;

    /// <summary>What to throw for it.</summary>
    /// <param name="name">The link as the bench file names it.</param>
    /// <param name="e">What the system said.</param>
    public static LinkException Lost(string name, Exception e) => new(
        name, e is SocketException s ? $"connection lost ({s.SocketErrorCode})" : "connection closed", e);

    /// <summary>Runs what opens a link under one deadline.</summary>
    /// <typeparam name="T">What is opened.</typeparam>
    /// <param name="name">The link as the bench file names it.</param>
    /// <param name="within">The deadline.</param>
    /// <param name="open">What opens it.</param>
    /// <param name="time">The clock of the deadline.</param>
    /// <param name="cancel">Ends the attempt.</param>
    /// <exception cref="LinkException">No answer in time.</exception>
    public static async Task<T> Within<T>(
        string name, TimeSpan within, Func<CancellationToken, Task<T>> open, TimeProvider time,
        CancellationToken cancel)
    {
        using var deadline = new CancellationTokenSource(within, time);
        using var either = CancellationTokenSource.CreateLinkedTokenSource(deadline.Token, cancel);
        try
        {
            return await open(either.Token);
        }
        catch (OperationCanceledException e) when (!cancel.IsCancellationRequested)
        {
            throw new LinkException(
                name, $"no answer within {within.TotalSeconds:0.###} s; check power and address", e);
        }
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<int> ReceiveLater(Memory<byte> buffer, CancellationToken cancel)
    {
        do
        {
            await _lookout.Wait(cancel);
            cancel.ThrowIfCancellationRequested();
        }
        // What was seen may have been seen for a wait that was given up, and been read since: reading now would block.
        while (!_socket.Poll(TimeSpan.Zero, SelectMode.SelectRead));
        return _socket.Receive(buffer.Span);
    }
}
