using System.Net.Sockets;
using System.Threading.Tasks.Sources;

namespace BenchRunner.Instruments.Links;

/// <summary>Waits beside its reader until a socket has something to read, on a thread of its own that begins with the
/// first wait.</summary>
/// <remarks>
/// The framework's own waiting puts a socket under watch for good: from then on whatever comes wakes two more threads,
/// also where the reader is there already, and a round trip takes near twice as long. One wait at a time; no wait
/// allocates.
/// </remarks>
internal sealed class Lookout(Socket socket) : IValueTaskSource, IDisposable
{
    // How long the thread stays with a wait that was given up.
    private static readonly TimeSpan Slice = TimeSpan.FromMilliseconds(100);

    private readonly SemaphoreSlim _asked = new(0);
    private ManualResetValueTaskSourceCore<bool> _come = new() { RunContinuationsAsynchronously = true };
    private CancellationTokenRegistration _givenUp;
    private int _isDue;
    private bool _isBegun;
    private volatile bool _isOver;

    /// <summary>Waits until there is something to read, or the socket is of no more use.</summary>
    /// <exception cref="OperationCanceledException">Cancelled.</exception>
    public ValueTask Wait(CancellationToken cancel)
    {
        _come.Reset();
        var wait = new ValueTask(this, _come.Version);
        Volatile.Write(ref _isDue, 1);
        _givenUp = cancel.UnsafeRegister(
            static (lookout, cancel) => ((Lookout)lookout!).End(new OperationCanceledException(cancel)), this);
        if (!_isBegun)
        {
            _isBegun = true;
            new Thread(Look) { IsBackground = true, Name = nameof(Lookout) }.UnsafeStart();
        }

        _asked.Release();
        return wait;
    }

    /// <summary>Lets the thread go; the socket's end is the owner's matter.</summary>
    public void Dispose()
    {
        _isOver = true;
        _asked.Release();
    }

    void IValueTaskSource.GetResult(short token)
    {
        _givenUp.Dispose();
        _come.GetResult(token);
    }

    ValueTaskSourceStatus IValueTaskSource.GetStatus(short token) => _come.GetStatus(token);

    void IValueTaskSource.OnCompleted(
        Action<object?> continuation, object? state, short token, ValueTaskSourceOnCompletedFlags flags) =>
        _come.OnCompleted(continuation, state, token, flags);

    private void Look()
    {
        while (true)
        {
            _asked.Wait();
            while (Volatile.Read(ref _isDue) == 1)
            {
                if (HasCome())
                {
                    End(null);
                }
            }

            if (_isOver)
            {
                return;
            }
        }
    }

    private bool HasCome()
    {
        try
        {
            return socket.Poll(Slice, SelectMode.SelectRead);
        }
        catch (Exception e) when (StreamSocket.IsLoss(e))
        {
            // The reader finds out why.
            return true;
        }
    }

    private void End(Exception? why)
    {
        if (Interlocked.Exchange(ref _isDue, 0) == 0)
        {
            return;
        }

        if (why is null)
        {
            _come.SetResult(true);
        }
        else
        {
            _come.SetException(why);
        }
    }
}
