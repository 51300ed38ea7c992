using System.Collections.Concurrent;
using System.Runtime.CompilerServices;
using System.Runtime.ExceptionServices;
using System.Text;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>One connection to one instrument: messages out, replies in, and whether the next reply can be
/// trusted.</summary>
/// <remarks>
/// Invariants. (1) One owner at a time asks; only <see cref="Send"/> may come from any thread. (2) The doubt is noted
/// before a question goes out and taken back only when its reply, and nothing after it, was read: whatever ends an
/// exchange in between, time-out, cancellation or nonsense, leaves it standing. (3) With a doubt standing nothing is
/// asked before a resynchronisation: the late reply would answer the next question. (4) A broken wire stays broken,
/// with its first reason. (5) What sets down is sent again after a device clear, which may have dropped it, until the
/// error queue was read empty behind it.
/// </remarks>
internal sealed class ScpiWire : IDisposable
{
    /// <summary>The question for the oldest entry of the error queue.</summary>
    public const string ErrorQuery = "SYSTem:ERRor?";

    private const int MostErrors = 64;
    private static readonly TimeSpan ProbePause = TimeSpan.FromMilliseconds(1);
    private const string OpeningTheLine = "opening the line";

    private readonly ILink _link;
    private readonly SessionOptions _options;
    private readonly Action<InstrumentEventKind, string> _report;
    private readonly WireTrust _trust;
    private readonly ReplyStream _replies;
    private readonly Deadline _deadline;
    private readonly Resynchronisation _resynchronisation;
    private readonly Action<int> _extend;
    private readonly TimeProvider _time;
    private readonly ProgramMessage _sent = new();
    private readonly ConcurrentQueue<string> _settingDown = new();
    private volatile bool _errorsUnread;

    /// <summary>Takes over a link that was just opened.</summary>
    /// <param name="link">The link; closed with the wire, or when it breaks.</param>
    /// <param name="options">Bounds.</param>
    /// <param name="time">The clock of all deadlines.</param>
    /// <param name="report">Told what happens; from any thread.</param>
    public ScpiWire(ILink link, SessionOptions options, TimeProvider time, Action<InstrumentEventKind, string> report)
    {
        (_link, _options, _time, _report) = (link, options, time, report);
        if (link.KeepsMessages)
        {
            link.Discarded += what => report(InstrumentEventKind.Discarded, what);
        }

        _trust = new WireTrust(link, options.ReplyWithin, report);
        _replies = new ReplyStream(link);
        _deadline = new Deadline(time);
        _resynchronisation = new Resynchronisation(link, _replies, _deadline, options, time);
        _extend = Extend;
    }

    /// <summary>Why the wire is of no use any more; null while it is.</summary>
    public LinkException? Broken => _trust.Broken;

    /// <summary>Sends one message that has no reply. From any thread; never waits for an exchange.</summary>
    /// <exception cref="LinkException">The link is lost; the wire is broken.</exception>
    public void Send(string command)
    {
        Span<byte> message = stackalloc byte[ProgramMessage.Longest];
        var length = ProgramMessage.Encode(command, message);
        _errorsUnread = true;
        Write(message[..length]);
    }

    /// <summary>Sends one message that sets down. From any thread; never waits for an exchange.</summary>
    /// <inheritdoc cref="Send" path="/exception"/>
    public void SendDown(string command)
    {
        if (_link.KeepsMessages)
        {
            _settingDown.Enqueue(command);
        }

        Send(command);
    }

    /// <summary>Ends whatever half message an earlier user left, and notes that its reply may come.</summary>
    public void Terminate()
    {
        _trust.Note(OpeningTheLine);
        Write("\n"u8);
    }

    /// <summary>Asks one question and reads its reply, a line.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> Ask<T>(string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        await Ready(cancel);
        return await Exchange(query, parse, cancel);
    }

    /// <summary>Asks one question and reads its reply, a block, into a pooled buffer.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> AskBlock<T>(string query, int bound, ReplyParser<T> parse, CancellationToken cancel)
    {
        await Ready(cancel);
        _trust.Note(query);
        var token = _deadline.Start(_options.ReplyWithin, cancel);
        try
        {
            Put(query);
            await _replies.ReadBlock(bound, _extend, token);
            var value = parse(_replies.Blocks.Block(0));
            Finish(query);
            return value;
        }
        catch (Exception e)
        {
            // With its link lost nothing more comes; inside a block on a stream no end could be told from data: either
            // way only a new connection helps, and what is missing says more than how the link ended.
            if (e is LinkException
                || (!_link.KeepsMessages && _replies.Blocks.Announced is not null && !_replies.Blocks.IsWhole))
            {
                _trust.Break(new LinkException(
                    _link.Name, $"reply to '{query}' is {_replies.Blocks.Missing().Message}", e));
            }

            var echo = e is ReplyException && _replies.Blocks.Head.StartsWith(_sent.Text);
            var why = echo ? new ReplyException(ReplyFault.Echo, query) : e;
            ExceptionDispatchInfo.Throw(_trust.Failure(why, query, cancel));
            throw;
        }
        finally
        {
            _deadline.End();
            _replies.Blocks.Dispose();
        }
    }

    /// <summary>Asks a question that the instrument may not know, and the error queue right behind it, so that a
    /// refusal shows at once.</summary>
    /// <returns>The answer, null where the question was refused, and the entry of the error queue.</returns>
    public async ValueTask<(string? Answer, ErrorEntry Error)> Probe(string query, CancellationToken cancel)
    {
        await Ready(cancel);
        _trust.Note(query);
        var token = _deadline.Start(_options.ReplyWithin, cancel);
        try
        {
            Put(query);
            string? answer = null;
            if (_link.KeepsMessages)
            {
                // A second question would make the reply to the first one void; the status byte says what became of it.
                if (await IsAnswered(token))
                {
                    answer = Encoding.UTF8.GetString((await _replies.ReadLine(token)).Span);
                }

                Put(ErrorQuery);
            }
            else
            {
                Put(ErrorQuery);
                var line = await _replies.ReadLine(token);
                if (ErrorEntry.IsOne(line.Span))
                {
                    Finish(query);
                    return (null, ErrorEntry.Parse(line.Span));
                }

                answer = Encoding.UTF8.GetString(line.Span);
            }

            var error = ErrorEntry.Parse((await _replies.ReadLine(token)).Span);
            Finish(query);
            return (answer, error);
        }
        catch (Exception e)
        {
            ExceptionDispatchInfo.Throw(_trust.Failure(e, query, cancel));
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
        if (_trust.WhyNot is not null)
        {
            await Resynchronise(cancel);
        }

        // Taken back first: a command that another thread sends meanwhile sets it again.
        _errorsUnread = false;
        try
        {
            return await EmptyQueue(cancel);
        }
        catch
        {
            _errorsUnread = true;
            throw;
        }
    }

    /// <summary>Makes sure that the next reply belongs to the next question, and that the error queue holds nothing
    /// old.</summary>
    public async ValueTask Ready(CancellationToken cancel)
    {
        if (Broken is { } why)
        {
            throw new LinkException(_link.Name, $"not used any more since: {why.Message}", why);
        }

        if (_trust.WhyNot is null && await HasUnasked(cancel))
        {
            _trust.Doubt("something came that nothing had asked for");
        }

        if (_trust.WhyNot is not null || _errorsUnread)
        {
            foreach (var entry in await ReadErrors(cancel))
            {
                _report(InstrumentEventKind.Errors, $"the error queue held {entry}");
            }
        }
    }

    /// <summary>Marks the wire as of no use and closes its link; the first reason stays.</summary>
    public LinkException Break(LinkException why) => _trust.Break(why);

    /// <inheritdoc/>
    public void Dispose()
    {
        _link.Dispose();
        _deadline.Dispose();
    }

    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    private async ValueTask<T> Exchange<T>(string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        _trust.Note(query);
        var token = _deadline.Start(_options.ReplyWithin, cancel);
        try
        {
            Put(query);
            var value = parse(_sent.Reply(await _replies.ReadLine(token)));
            Finish(query);
            return value;
        }
        catch (Exception e)
        {
            ExceptionDispatchInfo.Throw(_trust.Failure(e, query, cancel));
            throw;
        }
        finally
        {
            _deadline.End();
        }
    }

    /// <summary>Waits until a reply comes or the error queue holds why none does.</summary>
    private async ValueTask<bool> IsAnswered(CancellationToken cancel)
    {
        const byte ErrorQueue = 1 << 2;
        const byte MessageAvailable = 1 << 4;
        while (!_link.HasInput)
        {
            var status = await _link.ReadStatus(cancel);
            if ((status & (ErrorQueue | MessageAvailable)) == ErrorQueue && !_link.HasInput)
            {
                return false;
            }

            await Task.Delay(ProbePause, _time, cancel);
        }

        return true;
    }

    private async ValueTask<IReadOnlyList<ErrorEntry>> EmptyQueue(CancellationToken cancel)
    {
        var confirmed = _settingDown.Count;
        List<ErrorEntry>? entries = null;
        for (var n = 0; n < MostErrors; n++)
        {
            var entry = await Exchange(ErrorQuery, ErrorEntry.Parse, cancel);
            if (entry.IsNone)
            {
                while (confirmed-- > 0)
                {
                    _settingDown.TryDequeue(out _);
                }

                return entries ?? (IReadOnlyList<ErrorEntry>)[];
            }

            (entries ??= []).Add(entry);
        }

        throw _trust.Break(new LinkException(
            _link.Name, $"the error queue is not empty after {MostErrors} entries, last {entries![^1]}"));
    }

    private async ValueTask Resynchronise(CancellationToken cancel)
    {
        var why = _trust.WhyNot;
        try
        {
            if (_link.KeepsMessages)
            {
                await Clear(cancel);
                _report(InstrumentEventKind.Resynchronised, $"after '{why}'; the device was cleared");
                return;
            }

            var dropped = await _resynchronisation.Run(Put, cancel);
            _trust.Restore();
            if (dropped > 0 || why != OpeningTheLine)
            {
                _report(InstrumentEventKind.Resynchronised, $"after '{why}'; {dropped} bytes that came late were "
                    + $"dropped");
            }
        }
        catch (OperationCanceledException e) when (!cancel.IsCancellationRequested)
        {
            throw _trust.Break(new LinkException(_link.Name, $"gives no sign of life after '{why}'", e));
        }
        catch (Exception e) when (e is ReplyException or LinkException)
        {
            throw _trust.Break(new LinkException(
                _link.Name, $"cannot be resynchronised after '{why}': {e.Message}", e));
        }
    }

    private async ValueTask Clear(CancellationToken cancel)
    {
        var token = _deadline.Start(_options.ReplyWithin, cancel);
        try
        {
            _replies.Drop();
            await _link.Clear(token);
            _trust.Restore();
            foreach (var command in _settingDown.ToArray())
            {
                Send(command);
            }
        }
        finally
        {
            _deadline.End();
        }
    }

    private void Put(string query) => Write(_sent.Write(query));

    private void Write(ReadOnlySpan<byte> message)
    {
        try
        {
            _link.Write(message);
        }
        catch (LinkException e)
        {
            // Part of the message may be out: whatever went next would be joined to it.
            throw _trust.Break(e);
        }
    }

    private void Extend(int length) =>
        _deadline.Extend(_options.ReplyWithin + TimeSpan.FromSeconds(length / _options.BlockRate));

    /// <summary>Takes the doubt back, unless more came than was asked for.</summary>
    private void Finish(string query)
    {
        _trust.Restore();
        if (_replies.HoldsReply)
        {
            _trust.Doubt($"more than one reply to '{query}'");
        }
    }

    private async ValueTask<bool> HasUnasked(CancellationToken cancel)
    {
        try
        {
            return await _replies.HasUnasked(cancel);
        }
        catch (LinkException e)
        {
            throw _trust.Break(e);
        }
    }
}
