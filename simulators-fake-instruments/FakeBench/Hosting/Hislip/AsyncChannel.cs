using System.Buffers.Binary;
using System.Net.Sockets;
using System.Text;
using FakeBench.Instruments;

namespace FakeBench.Hosting.Hislip;

/// <summary>The asynchronous channel of a session: locks, status, the longest message, device clear (IVI-6.1, 6.5, 6.6,
/// 6.9, 6.10, 6.12, 6.14).</summary>
public sealed class AsyncChannel(
    Socket socket, Session session, Instrument instrument, LockDesk desk, ServerTerms terms, TimeProvider time)
    : IDisposable
{
    // Two letters that name the server's maker; no registered one.
    private const uint Vendor = ((uint)'F' << 8) | 'B';

    private readonly Outlet _out = new(socket);

    /// <summary>Sends a message to the client.</summary>
    public Task Send(Frame frame, CancellationToken stop) => _out.Send(frame, stop);

    /// <summary>Serves the channel until the client leaves.</summary>
    public async Task Serve(CancellationToken stop)
    {
        await Send(new Frame(Kind.AsyncInitializeResponse, 0, Vendor, []), stop);
        var waiting = Task.CompletedTask;
        try
        {
            while (await Frame.Receive(socket, stop) is { } frame)
            {
                await session.StayIfDeaf(stop);
                if (frame.Kind == Kind.AsyncLock && frame.Control == 1)
                {
                    // A lock may be waited for; the status is to be had meanwhile.
                    waiting = Task.WhenAll(waiting, TakeLock(frame, stop));
                    continue;
                }

                try
                {
                    await Send(Obey(frame), stop);
                }
                catch (TroubleException small) when (!small.IsFatal)
                {
                    await Send(small.Answer, stop);
                }
            }
        }
        catch (TroubleException fatal)
        {
            await Send(fatal.Answer, stop);
        }
    }

    /// <inheritdoc/>
    public void Dispose() => _out.Dispose();

    private Frame Obey(Frame frame)
    {
        switch (frame.Kind)
        {
            case Kind.AsyncLock when frame.Control == 0:
                return new Frame(Kind.AsyncLockResponse, desk.Release(session) switch
                {
                    true => 1,
                    false => 2,
                    null => 3,
                }, 0, []);
            case Kind.AsyncLock:
                throw TroubleException.UnknownControl();
            case Kind.AsyncLockInfo:
                return new Frame(
                    Kind.AsyncLockInfoResponse, (byte)(desk.IsExclusive ? 1 : 0), (uint)desk.Holders, []);
            case Kind.AsyncMaximumMessageSize:
                return AgreeOnLongest(frame);
            case Kind.AsyncDeviceClear:
                session.BeginClear();
                return new Frame(Kind.AsyncDeviceClearAcknowledge, (byte)(terms.PrefersOverlapped ? 1 : 0), 0, []);
            case Kind.AsyncStatusQuery:
                if ((frame.Control & 1) != 0)
                {
                    session.Read();
                }

                return new Frame(Kind.AsyncStatusResponse, (byte)instrument.Poll(session.HasUnread), 0, []);
            case Kind.AsyncRemoteLocalControl:
                return new Frame(Kind.AsyncRemoteLocalResponse, 0, 0, []);
            default:
                throw TroubleException.UnknownKind(frame.Kind);
        }
    }

    private Frame AgreeOnLongest(Frame frame)
    {
        if (frame.Payload.Length != sizeof(ulong))
        {
            throw TroubleException.BadPayload();
        }

        session.Limit(BinaryPrimitives.ReadUInt64BigEndian(frame.Payload));
        byte[] ours = new byte[sizeof(ulong)];
        BinaryPrimitives.WriteUInt64BigEndian(ours, terms.LongestMessage);
        return new Frame(Kind.AsyncMaximumMessageSizeResponse, 0, 0, ours);
    }

    private async Task TakeLock(Frame frame, CancellationToken stop)
    {
        string name = Encoding.Latin1.GetString(frame.Payload);
        long began = time.GetTimestamp();
        var patience = TimeSpan.FromMilliseconds(frame.Parameter);
        while (true)
        {
            Task changed = desk.Changed();
            bool? granted = desk.TryTake(session, name);
            TimeSpan left = patience - time.GetElapsedTime(began);
            if (granted == false && left > TimeSpan.Zero)
            {
                using var over = CancellationTokenSource.CreateLinkedTokenSource(stop);
                await Task.WhenAny(changed, Task.Delay(left, time, over.Token));
                await over.CancelAsync();
                stop.ThrowIfCancellationRequested();
                continue;
            }

            byte answer = granted switch
            {
                true => 1,
                false => 0,
                null => 3,
            };
            await Send(new Frame(Kind.AsyncLockResponse, answer, 0, []), stop);
            return;
        }
    }
}
