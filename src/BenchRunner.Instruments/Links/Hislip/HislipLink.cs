using System.Runtime.CompilerServices;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>A link over HiSLIP (IVI-6.1), protocol version 1.0, in synchronised mode.</summary>
/// <remarks>
/// A reply is paired with its question by its identifier: what bears another one is dropped here, so that the late
/// answer to a question given up never reaches the next one. A command that another thread sends while a reply is due
/// makes that reply void: the instrument says Interrupted, and the exchange that waits for it ends at once.
/// </remarks>
internal sealed class HislipLink : ILink
{
    private readonly HislipChannel _synchronous;
    private readonly HislipChannel _asynchronous;
    private readonly HislipRequests _requests;
    private readonly TimeSpan _writeWithin;
    private readonly HislipIds _ids = new();
    private readonly int _longestPart;

    // Held while a message goes out, and while none may: during a clear, and between the halves of an interruption.
    private readonly SemaphoreSlim _sending = new(1, 1);
    private byte[] _out = new byte[HislipHeader.Size + 1024];
    private HislipHeader _reading;
    private bool _inMessage;
    private string? _failed;

    /// <summary>Takes over a session that was opened.</summary>
    /// <param name="name">The link as the bench file names it.</param>
    /// <param name="channels">Its two channels.</param>
    /// <param name="longest">The longest message that the server takes, its header included, bytes.</param>
    /// <param name="writeWithin">How long a write may take.</param>
    public HislipLink(
        string name, (HislipChannel Synchronous, HislipChannel Asynchronous) channels, ulong longest,
        TimeSpan writeWithin)
    {
        (Name, (_synchronous, _asynchronous), _writeWithin) = (name, channels, writeWithin);
        _requests = new HislipRequests(name, _asynchronous, Drop);

        // Whether the header counts is told differently; that it does is the safe side.
        _longestPart = (int)Math.Min(longest - HislipHeader.Size, HislipHeader.LongestPayload);
    }

    public event Action<string>? Discarded;

    public string Name { get; }

    public bool KeepsMessages => true;

    public bool AtEnd { get; private set; }

    public bool HasInput => _synchronous.HasInput;

    public void Write(ReadOnlySpan<byte> message)
    {
        if (!_sending.Wait(_writeWithin))
        {
            throw new LinkException(Name, "not cleared in time, so nothing more can be sent");
        }

        try
        {
            ThrowIfFailed();
            while (message.Length > _longestPart)
            {
                Put(HislipType.Data, message[.._longestPart]);
                message = message[_longestPart..];
            }

            Put(HislipType.DataEnd, message);
        }
        finally
        {
            _sending.Release();
        }
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel)
    {
        AtEnd = false;
        for (var dropped = 0; !_inMessage || (_synchronous.Left == 0 && _reading.Type == HislipType.Data); dropped++)
        {
            if (dropped > HislipRequests.MostDropped)
            {
                throw new LinkException(
                    Name, $"more than {HislipRequests.MostDropped} messages that nothing had asked for");
            }

            _inMessage = false;
            _reading = await _synchronous.Next(cancel);
            _inMessage = await Takes(_reading, cancel);
        }

        var count = await _synchronous.Read(buffer, cancel);
        if (_synchronous.Left == 0 && _reading.Type == HislipType.DataEnd)
        {
            (AtEnd, _inMessage) = (true, false);
            lock (_ids)
            {
                _ids.Delivered(_reading.Parameter);
            }
        }

        return count;
    }

    public async ValueTask Clear(CancellationToken cancel)
    {
        await _sending.WaitAsync(cancel);
        try
        {
            ThrowIfFailed();
            await _requests.Ask(
                new HislipHeader(HislipType.AsyncDeviceClear, 0, 0, 0), default,
                HislipType.AsyncDeviceClearAcknowledge, cancel);

            // Control 0: this client is for synchronised mode, whatever the server prefers.
            _synchronous.Send(new HislipHeader(HislipType.DeviceClearComplete, 0, 0, 0), default);
            await Acknowledged(cancel);
            lock (_ids)
            {
                _ids.Restart();
            }

            _requests.Restart();
            (_inMessage, AtEnd) = (false, false);
        }
        catch
        {
            // Half a clear: neither side knows which messages the other one still counts.
            _failed = "a device clear was not finished";
            throw;
        }
        finally
        {
            _sending.Release();
        }
    }

    public async ValueTask<byte> ReadStatus(CancellationToken cancel)
    {
        HislipHeader query;
        lock (_ids)
        {
            query = new HislipHeader(HislipType.AsyncStatusQuery, _ids.TakeControl(), _ids.Last, 0);
        }

        return (await _requests.Ask(query, default, HislipType.AsyncStatusResponse, cancel)).Control;
    }

    public void Dispose()
    {
        _synchronous.Dispose();
        _asynchronous.Dispose();
    }

    private void Put(HislipType type, ReadOnlySpan<byte> part)
    {
        var length = HislipHeader.Size + part.Length;
        if (_out.Length < length)
        {
            _out = new byte[length];
        }

        lock (_ids)
        {
            new HislipHeader(type, _ids.TakeControl(), _ids.Next(), (ulong)part.Length).Write(_out);
        }

        part.CopyTo(_out.AsSpan(HislipHeader.Size));
        _synchronous.Send(_out.AsSpan(0, length));
    }

    /// <summary>Whether a message is part of the reply that is due.</summary>
    private async ValueTask<bool> Takes(HislipHeader header, CancellationToken cancel)
    {
        uint last;
        lock (_ids)
        {
            last = _ids.Last;
        }

        if (HislipRules.Judge(header, last, clearing: false) is { } fault)
        {
            if (fault is HislipFault.OutOfSequence or HislipFault.WrongChannel)
            {
                throw _synchronous.Refused(new HislipException(fault, $"{header.Type}"));
            }

            Drop(FormattableString.Invariant(
                $"{fault}: {header.Type} {header.Parameter:x8} on the synchronous channel"));
            return false;
        }

        switch (header.Type)
        {
            case HislipType.Interrupted:
                return await Interrupted(header.Parameter, cancel);
            case HislipType.Error:
                throw new ReplyException(ReplyFault.Interrupted, await _synchronous.Text(header, cancel));
            case HislipType.FatalError:
                throw new LinkException(
                    Name, $"the instrument ended the session: {await _synchronous.Text(header, cancel)}");
            default:
                return true;
        }
    }

    /// <summary>Sends nothing until the other half of the interruption has come.</summary>
    /// <returns>False: the interruption is no part of a reply.</returns>
    /// <exception cref="ReplyException">The reply that is due is void.</exception>
    private async ValueTask<bool> Interrupted(uint id, CancellationToken cancel)
    {
        await _sending.WaitAsync(cancel);
        try
        {
            await _requests.Interruption(cancel);
        }
        finally
        {
            _sending.Release();
        }

        bool isVoid;
        lock (_ids)
        {
            isVoid = _ids.IsVoidedBy(id);
        }

        return isVoid ? throw new ReplyException(ReplyFault.Interrupted, "Interrupted") : false;
    }

    /// <summary>Drops everything up to the acknowledgement of a clear.</summary>
    private async ValueTask Acknowledged(CancellationToken cancel)
    {
        while (true)
        {
            var header = await _synchronous.Next(cancel);
            if (header.Type == HislipType.FatalError)
            {
                throw new LinkException(
                    Name, $"the instrument ended the session: {await _synchronous.Text(header, cancel)}");
            }

            if (HislipRules.Judge(header, HislipIds.None, clearing: true) is null)
            {
                return;
            }
        }
    }

    private void ThrowIfFailed()
    {
        if (_failed is { } why)
        {
            throw new LinkException(Name, why);
        }
    }

    private void Drop(string what) => Discarded?.Invoke(what);
}
