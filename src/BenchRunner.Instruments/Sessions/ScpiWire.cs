using System.Runtime.CompilerServices;
using System.Runtime.ExceptionServices;
using System.Text;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>One connection to one instrument: messages out, replies in, and whether the next reply can be trusted.</summary>
/// <remarks>
/// Invariants. (1) One owner at a time asks; only <see cref="Send"/> may come from any thread. (2) The doubt is noted
/// before a question goes out and taken back only when its reply, and nothing after it, was read: whatever ends an
/// exchange in between, time-out, cancellation or nonsense, leaves it standing. (3) With a doubt standing nothing is
/// asked before a resynchronisation: the late reply would answer the next question. (4) A broken wire stays broken, with
/// its first reason.
/// </remarks>
internal sealed class ScpiWire(ILink link, SessionOptions options, TimeProvider time, Action<InstrumentEventKind, string> report)
    : IDisposable
{
    /// <summary>The question for the oldest entry of the error queue.</summary>
    public const string ErrorQuery = "SYSTem:ERRor?";

    private const int LongestMessage = 1024;
    private const int MostErrors = 64;
    private const int MostDropped = 64;
    private const int HighestSentinel = 255;

    private readonly byte[] _buffer = new byte[ReplyLine.Limit + 4096];
    private readonly byte[] _sent = new byte[LongestMessage];
    private readonly BlockReader _block = new();
    private readonly Deadline _deadline = new(time);
    private int _sentLength;
    private int _start;
    private int _end;
    private int _sentinel = 100;
    private string? _doubt;
    private LinkException? _broken;
    private volatile bool _errorsUnread;

    /// <summary>Why the wire is of no use any more; null while it is.</summary>
    public LinkException? Broken => Volatile.Read(ref _broken);

    /// <summary>Notes that what comes next may belong to something asked before.</summary>
    public void Doubt(string why)
    {
        if (_doubt is null)
        {
            _doubt = why;
            report(InstrumentEventKind.Doubt, why);
        }
    }

    /// <summary>Sends one message that has no reply. From any thread; never waits for an exchange.</summary>
    /// <exception cref="LinkException">The link is lost; the wire is broken.</exception>
    public void Send(string command)
    {
        Span<byte> message = stackalloc byte[LongestMessage];
        var length = Encode(command, message);
        _errorsUnread = true;
        Write(message[..length]);
    }

    /// <summary>Ends whatever half message an earlier user left, and notes that its reply may come.</summary>
    public void Terminate()
    {
        _doubt = "opening the line";
        Write("\n"u8);
    }

    /// <summary>Asks one question and reads its reply, a line.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> Ask<T>(string query, ReplyParser<T> parse, bool quoted, CancellationToken cancel)
    {
        await Ready(cancel);
        return await Exchange(query, parse, quoted, cancel);
    }

    /// <summary>Asks one question and reads its reply, a block, into a pooled buffer.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> AskBlock<T>(string query, int bound, ReplyParser<T> parse, CancellationToken cancel)
    {
        await Ready(cancel);
        _doubt = query;
        var token = _deadline.Start(options.ReplyWithin, cancel);
        try
        {
            _block.Begin(bound);
            Put(query);
            await ReadBlock(token);
            var value = parse(_block.Block(0));
            Finish(query);
            return value;
        }
        catch (Exception e)
        {
            if (_block.Announced is not null && !_block.IsWhole)
            {
                // More of the block may follow, and no end could be told from data: only a new connection helps.
                Break(new LinkException(link.Name, $"given up inside the block that answers '{query}': {_block.Missing().Message}", e));
            }

            var echo = e is ReplyException && _block.Head.StartsWith(_sent.AsSpan(0, _sentLength - 1));
            ExceptionDispatchInfo.Throw(Failure(echo ? new ReplyException(ReplyFault.Echo, query) : e, query, cancel));
            throw;
        }
        finally
        {
            _deadline.End();
            _block.Dispose();
        }
    }

    /// <summary>Asks a question that the instrument may not know, and the error queue right behind it, so that a refusal shows at once.</summary>
    /// <returns>The answer, null where the question was refused, and the entry of the error queue.</returns>
    public async ValueTask<(string? Answer, ErrorEntry Error)> Probe(string query, CancellationToken cancel)
    {
        await Ready(cancel);
        _doubt = query;
        var token = _deadline.Start(options.ReplyWithin, cancel);
        try
        {
            Put(query);
            Put(ErrorQuery);
            var answer = Encoding.UTF8.GetString(_buffer.AsSpan(await ReadLine(false, token)));
            var entry = Encoding.UTF8.GetBytes(answer);
            if (answer.Contains(",\"", StringComparison.Ordinal))
            {
                var refusal = ErrorEntry.Parse(entry);
                Finish(query);
                return (null, refusal);
            }

            var error = ErrorEntry.Parse(_buffer.AsSpan(await ReadLine(false, token)));
            Finish(query);
            return (answer, error);
        }
        catch (Exception e)
        {
            ExceptionDispatchInfo.Throw(Failure(e, query, cancel));
            throw;
        }
        finally
        {
            _deadline.End();
        }
    }

    /// <summary>Reads the error queue until it is empty.</summary>
    /// <exception cref="LinkException">It does not get empty, or the link failed.</exception>
    public async ValueTask<IReadOnlyList<ErrorEntry>> ReadErrors(CancellationToken cancel)
    {
        if (_doubt is not null)
        {
            await Resynchronise(cancel);
        }

        List<ErrorEntry>? entries = null;
        for (var n = 0; n < MostErrors; n++)
        {
            var entry = await Exchange(ErrorQuery, ErrorEntry.Parse, false, cancel);
            if (entry.IsNone)
            {
                _errorsUnread = false;
                return entries ?? (IReadOnlyList<ErrorEntry>)[];
            }

            (entries ??= []).Add(entry);
        }

        throw Break(new LinkException(link.Name, $"the error queue is not empty after {MostErrors} entries, last {entries![^1]}"));
    }

    /// <summary>Makes sure that the next reply belongs to the next question, and that the error queue holds nothing old.</summary>
    public async ValueTask Ready(CancellationToken cancel)
    {
        if (Broken is { } why)
        {
            throw new LinkException(link.Name, $"not used any more since: {why.Message}", why);
        }

        if (_doubt is null && await HasUnasked(cancel))
        {
            Doubt("something came that nothing had asked for");
        }

        if (_doubt is not null || _errorsUnread)
        {
            foreach (var entry in await ReadErrors(cancel))
            {
                report(InstrumentEventKind.Errors, $"the error queue held {entry}");
            }
        }
    }

    /// <summary>Marks the wire as of no use and closes its link; the first reason stays.</summary>
    public LinkException Break(LinkException why)
    {
        if (Interlocked.CompareExchange(ref _broken, why, null) is null)
        {
            report(InstrumentEventKind.Broken, Printable.Text(why.Message));
            link.Dispose();
        }

        return why;
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        link.Dispose();
        _block.Dispose();
        _deadline.Dispose();
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<T> Exchange<T>(string query, ReplyParser<T> parse, bool quoted, CancellationToken cancel)
    {
        _doubt = query;
        var token = _deadline.Start(options.ReplyWithin, cancel);
        try
        {
            Put(query);
            var value = parse(Reply(await ReadLine(quoted, token)));
            Finish(query);
            return value;
        }
        catch (Exception e)
        {
            ExceptionDispatchInfo.Throw(Failure(e, query, cancel));
            throw;
        }
        finally
        {
            _deadline.End();
        }
    }

    /// <summary>Brings question and reply together again: drain, then a number asked for that nothing else answers, twice.</summary>
    /// <remarks>A late reply may happen to be the number; the second round, with another one, tells.</remarks>
    private async ValueTask Resynchronise(CancellationToken cancel)
    {
        var why = _doubt;
        try
        {
            var dropped = await Drain(cancel);
            dropped += await Sentinel(cancel);
            dropped += await Sentinel(cancel);
            _doubt = null;
            report(InstrumentEventKind.Resynchronised, $"after '{Printable.Text(why!)}'; {dropped} bytes that came late were dropped");
        }
        catch (Exception e) when (e is ReplyException or LinkException || (e is OperationCanceledException && !cancel.IsCancellationRequested))
        {
            throw Break(new LinkException(link.Name, $"cannot be resynchronised after '{Printable.Text(why!)}': {e.Message}", e));
        }
    }

    private async ValueTask<int> Drain(CancellationToken cancel)
    {
        var began = time.GetTimestamp();
        var dropped = _end - _start;
        _start = _end = 0;
        while (time.GetElapsedTime(began) <= options.ReplyWithin + options.Silence)
        {
            var token = _deadline.Start(options.Silence, cancel);
            try
            {
                dropped += await Receive(_buffer, token);
            }
            catch (OperationCanceledException) when (!cancel.IsCancellationRequested)
            {
                return dropped;
            }
            finally
            {
                _deadline.End();
            }
        }

        throw new LinkException(link.Name, "does not fall silent");
    }

    private async ValueTask<int> Sentinel(CancellationToken cancel)
    {
        if (_sentinel == HighestSentinel)
        {
            throw new LinkException(link.Name, "resynchronised too often; replace cable or instrument");
        }

        _sentinel++;
        var dropped = 0;
        var token = _deadline.Start(options.ReplyWithin, cancel);
        try
        {
            Put(FormattableString.Invariant($"*ESE {_sentinel};*ESE?"));
            for (var n = 0; n < MostDropped; n++)
            {
                var reply = _buffer.AsMemory(await ReadLine(false, token));
                if (IsSentinel(ReplyText.Trim(reply.Span)))
                {
                    return dropped;
                }

                dropped += reply.Length + 1;
            }
        }
        finally
        {
            _deadline.End();
        }

        throw new LinkException(link.Name, $"more than {MostDropped} replies that nothing had asked for");
    }

    private bool IsSentinel(ReadOnlySpan<byte> reply) =>
        ReplyNumber.IsNumeric(reply) && ReplyNumber.Parse(reply) == _sentinel;

    private void Put(string query)
    {
        _sentLength = Encode(query, _sent);
        Write(_sent.AsSpan(0, _sentLength));
    }

    private void Write(ReadOnlySpan<byte> message)
    {
        try
        {
            link.Write(message);
        }
        catch (LinkException e)
        {
            // Part of the message may be out: whatever went next would be joined to it.
            throw Break(e);
        }
    }

    /// <summary>A reply, refused where it is the question itself.</summary>
    private ReadOnlySpan<byte> Reply(Range line)
    {
        var reply = _buffer.AsSpan(line);
        return reply.SequenceEqual(_sent.AsSpan(0, _sentLength - 1)) ? throw new ReplyException(ReplyFault.Echo, reply) : reply;
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<Range> ReadLine(bool quoted, CancellationToken token)
    {
        Range reply;
        int consumed;
        while (!ReplyLine.TryRead(_buffer.AsSpan(_start, _end - _start), quoted, out reply, out consumed))
        {
            if (_start > 0)
            {
                _buffer.AsSpan(_start, _end - _start).CopyTo(_buffer);
                (_start, _end) = (0, _end - _start);
            }

            _end += await Receive(_buffer.AsMemory(_end), token);
        }

        var from = _start;
        _start += consumed;
        return (from + reply.Start.Value)..(from + reply.End.Value);
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder))]
    private async ValueTask ReadBlock(CancellationToken token)
    {
        while (!_block.IsWhole)
        {
            var headDue = _block.Announced is null;
            _block.Advance(await Receive(_block.Space, token));
            if (headDue && _block.Announced is { } length)
            {
                _deadline.Extend(options.ReplyWithin + TimeSpan.FromSeconds(length / options.BlockRate));
            }
        }
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<int> Receive(Memory<byte> space, CancellationToken token)
    {
        var count = await link.Read(space, token);
        return count > 0 ? count : throw new LinkException(link.Name, "the instrument closed the connection");
    }

    /// <summary>Takes the doubt back, unless more came than was asked for.</summary>
    private void Finish(string query)
    {
        _doubt = null;
        if (_block.Excess > 0 || HoldsReply())
        {
            Doubt($"more than one reply to '{query}'");
        }
    }

    private async ValueTask<bool> HasUnasked(CancellationToken cancel)
    {
        try
        {
            while (!HoldsReply() && link.HasInput)
            {
                _start = 0;
                _end = await Receive(_buffer, cancel);
            }
        }
        catch (LinkException e)
        {
            throw Break(e);
        }

        return HoldsReply();
    }

    /// <summary>Whether more than the carriage return is held that some instruments send after their newline.</summary>
    private bool HoldsReply() => _buffer.AsSpan(_start, _end - _start).ContainsAnyExcept((byte)'\r');

    private Exception Failure(Exception e, string query, CancellationToken cancel)
    {
        switch (e)
        {
            case OperationCanceledException when cancel.IsCancellationRequested:
                report(InstrumentEventKind.Doubt, $"cancelled while the reply to '{query}' was due");
                return e;
            case OperationCanceledException:
                report(InstrumentEventKind.Doubt, $"no whole reply to '{query}' in time");
                return new LinkException(
                    link.Name, $"no whole reply to '{query}' within {options.ReplyWithin.TotalSeconds:0.###} s", e);
            case ReplyException reply:
                report(InstrumentEventKind.Doubt, $"reply to '{query}': {e.Message}");
                var failure = new LinkException(link.Name, $"reply to '{query}' is {e.Message}{Advice(reply.Fault)}", e);
                return reply.Fault == ReplyFault.TooLong ? Break(failure) : failure;
            case LinkException lost:
                return Break(lost);
            default:
                return e;
        }
    }

    private static string Advice(ReplyFault fault) =>
        fault == ReplyFault.Echo ? "; switch the instrument's echo off" : string.Empty;

    private static int Encode(string command, Span<byte> message)
    {
        if (command.Length is 0 or >= LongestMessage || command.AsSpan().ContainsAnyExceptInRange(' ', '~'))
        {
            throw new ArgumentException($"'{Printable.Text(command)}' is no program message of printable ASCII on one line");
        }

        var length = Encoding.ASCII.GetBytes(command, message);
        message[length] = (byte)'\n';
        return length + 1;
    }
}
