using System.Net.Sockets;
using FakeBench.Instruments;
using FakeBench.Scpi;

namespace FakeBench.Hosting.Hislip;

/// <summary>One client's session with one instrument: what comes on its synchronous channel (IVI-6.1, 3.1,
/// 6.12).</summary>
public sealed class Session : IDisposable
{
    private const uint FirstId = 0xffff_ff00;

    private readonly Instrument _instrument;
    private readonly int _boots;
    private readonly TimeProvider _time;
    private readonly ServerTerms _terms;
    private readonly Socket _synchronous;
    private readonly Outlet _out;
    private readonly Replier _replies;
    private readonly LockDesk _desk;
    private readonly MessageFramer _framer = new();
    private readonly Lock _state = new();
    private CancellationTokenSource _clear = new();
    private AsyncChannel? _asynchronous;
    private bool _overlapped;
    private uint _nextOwn = FirstId;
    private bool _unread;
    private bool _deaf;
    private bool _requested;

    /// <summary>Begins a session with its first message behind it.</summary>
    public Session(
        ushort id, Socket synchronous, Instrument instrument, LockDesk desk, ServerTerms terms, TimeProvider time)
    {
        (Id, _synchronous, _instrument, _desk, _terms) = (id, synchronous, instrument, desk, terms);
        (_boots, _time) = (instrument.Boots, time);
        _overlapped = terms.PrefersOverlapped;
        _out = new Outlet(synchronous);
        _replies = new Replier(_out, time);
    }

    /// <summary>Its identifier.</summary>
    public ushort Id { get; }

    /// <summary>Whether both channels stay open and are neither read nor written any more.</summary>
    public bool IsDeaf => Volatile.Read(ref _deaf);

    /// <summary>Whether a reply was sent that the client has not said it has read.</summary>
    public bool HasUnread
    {
        get
        {
            lock (_state)
            {
                return _unread;
            }
        }
    }

    /// <summary>Joins the asynchronous channel.</summary>
    /// <returns>Whether the session had none.</returns>
    public bool Join(AsyncChannel channel) => Interlocked.CompareExchange(ref _asynchronous, channel, null) is null;

    /// <summary>The client says what it takes.</summary>
    public void Limit(ulong longest) => _replies.Longest = Math.Max(longest, Frame.Head + 1);

    /// <summary>The client says that it has handed a whole reply up.</summary>
    public void Read()
    {
        lock (_state)
        {
            _unread = false;
        }
    }

    /// <summary>First step of a device clear: whatever is under way is given up.</summary>
    public void BeginClear()
    {
        _clear.Cancel();
        _replies.TakeBack();
    }

    /// <summary>Serves the synchronous channel until the client leaves.</summary>
    public async Task Serve(CancellationToken stop)
    {
        await _out.Send(Accepted(), stop);
        try
        {
            while (await Frame.Receive(_synchronous, stop) is { } frame)
            {
                await ObeyOrTell(frame, stop);
                await StayIfDeaf(stop);
            }
        }
        catch (TroubleException fatal)
        {
            await _out.Send(fatal.Answer, stop);
        }
    }

    /// <summary>Stays until the bench ends, where nothing is answered any more.</summary>
    public Task StayIfDeaf(CancellationToken stop) =>
        IsDeaf ? Task.Delay(Timeout.InfiniteTimeSpan, _time, stop) : Task.CompletedTask;

    /// <inheritdoc/>
    public void Dispose()
    {
        while (_desk.Release(this) is not null)
        {
        }

        _asynchronous?.Dispose();
        _out.Dispose();
        _replies.Dispose();
        _clear.Dispose();
    }

    private Frame Accepted()
    {
        const byte EncryptionMandatory = 2;
        uint version = _terms.EncryptionMandatory ? 0x0200u : 0x0100u;
        byte control = (byte)((_terms.PrefersOverlapped ? 1 : 0)
            | (_terms.EncryptionMandatory ? EncryptionMandatory : 0));
        return new Frame(Kind.InitializeResponse, control, (version << 16) | Id, []);
    }

    private async Task ObeyOrTell(Frame frame, CancellationToken stop)
    {
        try
        {
            await Obey(frame, stop);
        }
        catch (TroubleException small) when (!small.IsFatal)
        {
            await _out.Send(small.Answer, stop);
        }
    }

    private async Task Obey(Frame frame, CancellationToken stop)
    {
        if (_terms.EncryptionMandatory)
        {
            throw new TroubleException("security", true, 5, "Secure connection failed");
        }

        if (_asynchronous is null && frame.Kind is not Kind.FatalError)
        {
            throw TroubleException.OneChannel();
        }

        if (Frame.Head + (ulong)frame.Payload.Length > _terms.LongestMessage)
        {
            throw TroubleException.LongerThanAgreed();
        }

        switch (frame.Kind)
        {
            case Kind.Data or Kind.DataEnd or Kind.Trigger:
                await Take(frame, stop);
                break;
            case Kind.DeviceClearComplete:
                await EndClear(frame.Control, stop);
                break;
            case Kind.FatalError or Kind.Error:
                break;
            default:
                throw TroubleException.UnknownKind(frame.Kind);
        }
    }

    private async Task Take(Frame frame, CancellationToken stop)
    {
        using var either = CancellationTokenSource.CreateLinkedTokenSource(_clear.Token, stop);
        try
        {
            await _desk.Admitted(this, either.Token);
        }
        catch (OperationCanceledException) when (!stop.IsCancellationRequested)
        {
            // It waited for a lock of another client until this one gave up.
        }

        if (_clear.IsCancellationRequested)
        {
            return;
        }

        await NoteDelivery(frame, stop);
        if (frame.Kind == Kind.Trigger)
        {
            return;
        }

        foreach (string? message in _framer.Take(frame.Payload))
        {
            Answer(message, frame.Parameter, stop);
        }

        foreach (string? message in frame.Kind == Kind.DataEnd ? _framer.TakeEnd() : [])
        {
            Answer(message, frame.Parameter, stop);
        }

        await RequestService(stop);
    }

    /// <summary>In synchronised mode a message that comes before the reply to the last one was read makes it
    /// void.</summary>
    private async Task NoteDelivery(Frame frame, CancellationToken stop)
    {
        bool interrupts;
        lock (_state)
        {
            interrupts = _unread && (frame.Control & 1) == 0 && !_overlapped;
            _unread = false;
        }

        if (interrupts)
        {
            await _replies.Settle();
            _instrument.Interrupt();
            await _out.Send(new Frame(Kind.Interrupted, 0, frame.Parameter, []), stop);
            await _asynchronous!.Send(new Frame(Kind.AsyncInterrupted, 0, frame.Parameter, []), stop);
        }
    }

    private void Answer(string? message, uint id, CancellationToken stop)
    {
        Answer answer = _instrument.Obey(message);
        Volatile.Write(ref _deaf, _deaf || answer.Deaf);

        // Firmware that started anew has ended the connections of before.
        answer = _instrument.Boots == _boots ? answer : answer with { CutShort = true };
        if (IsDeaf || (answer.Bytes.Length == 0 && !answer.CutShort))
        {
            return;
        }

        lock (_state)
        {
            _unread = true;
            if (_overlapped)
            {
                (id, _nextOwn) = (_nextOwn, _nextOwn + 2);
            }
        }

        _replies.Begin(answer, id, stop);
    }

    private async Task RequestService(CancellationToken stop)
    {
        if (IsDeaf)
        {
            return;
        }

        int status = _instrument.Poll(HasUnread);
        bool wants = (status & (1 << 6)) != 0;
        if (wants && !_requested)
        {
            await _asynchronous!.Send(new Frame(Kind.AsyncServiceRequest, (byte)status, 0, []), stop);
        }

        _requested = wants;
    }

    private async Task EndClear(byte control, CancellationToken stop)
    {
        if (!_clear.IsCancellationRequested)
        {
            throw TroubleException.UnknownKind(Kind.DeviceClearComplete);
        }

        await _replies.Settle();
        _ = _framer.TakeEnd();
        lock (_state)
        {
            _overlapped = (control & 1) != 0 && _terms.PrefersOverlapped;
            (_unread, _nextOwn) = (false, FirstId);
        }

        _clear.Dispose();
        _clear = new CancellationTokenSource();
        await _out.Send(new Frame(Kind.DeviceClearAcknowledge, (byte)(_overlapped ? 1 : 0), 0, []), stop);
    }
}
