using System.Collections.Concurrent;
using System.Runtime.CompilerServices;
using System.Runtime.ExceptionServices;
using System.Text;
using BenchRunner.Instruments.Dialects;
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
    private const int MostErrors = 64;
    private static readonly TimeSpan ProbePause = TimeSpan.FromMilliseconds(1);
    private const string OpeningTheLine = "opening the line";

    private static readonly ErrorEntry NoEntry = new(0, null, null);

    private readonly ILink _link;
    private readonly SessionOptions _options;
    private readonly Action<InstrumentEventKind, string> _report;
    private readonly WireTrust _trust;
    private readonly ReplyStream _replies;
    private readonly Deadline _deadline;
    private readonly Resynchronisation _resynchronisation;
    private readonly Action<int> _extend;
    private readonly TimeProvider _time;
    private readonly Outlet _outlet;
    private readonly NumberedQuestion _numbered = new();
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
        _replies = new ReplyStream(link, options.Habits);
        _outlet = new Outlet(link, _trust, options.Habits);
        _deadline = new Deadline(time);
        _resynchronisation = new Resynchronisation(link, _replies, _deadline, options, time);
        _extend = Extend;
    }

    /// <summary>Why the wire is of no use any more; null while it is.</summary>
    public LinkException? Broken => _trust.Broken;

    /// <summary>Whether the wire is in a doubt that only a new link ends.</summary>
    public bool MustReopen => Habits.ReopensToRecover && !_link.KeepsMessages && _trust.WhyNot is not (null or OpeningTheLine);

    private WireHabits Habits => _options.Habits;

    /// <summary>Sends one message that has no reply. From any thread; never waits for an exchange.</summary>
    /// <exception cref="LinkException">The link is lost; the wire is broken.</exception>
    public void Send(string command)
    {
        _errorsUnread = true;
        _outlet.Tell(command);
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
        _outlet.Terminate();
    }

    /// <summary>Asks one question and reads its reply, a line.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> Ask<T>(string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        await Ready(cancel);
        return await Exchange(query, parse, cancel);
    }

    /// <summary>Asks one question with a number that its reply must bring back.</summary>
    /// <returns>The answer, and whether the instrument was switched on since it was asked so before.</returns>
    public async ValueTask<(T Answer, bool SwitchedOn)> AskNumbered<T>(
        string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        await Ready(cancel);
        var answer = await Exchange(_numbered.Next(query), reply => _numbered.Parse(reply, parse), cancel);
        return (answer, _numbered.SwitchedOn);
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
            await PutAndPass(query, token);
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

            var echo = e is ReplyException && _replies.Blocks.Head.StartsWith(_outlet.Question);
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
            (string? Answer, ErrorEntry Error) both;
            if (Habits.ErrorQuery is { } errors)
            {
                both = _link.KeepsMessages
                    ? await AskInTurn(query, errors, token) : await AskBoth(query, errors, token);
            }
            else
            {
                await PutAndPass(query, token);
                both = (Encoding.UTF8.GetString((await _replies.ReadLine(token)).Span), NoEntry);
            }

            Finish(query);
            return both;
        }
        catch (OperationCanceledException) when (Habits.ErrorQuery is null && !cancel.IsCancellationRequested)
        {
            // Without an error queue an instrument refuses by silence. The doubt stands: its answer may only be late.
            return (null, NoEntry);
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
            return Habits.ErrorQuery is { } query ? await EmptyQueue(query, cancel) : await Complete(cancel);
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

        if (_trust.WhyNot is null && _outlet.AwaitsEcho)
        {
            await PassEchoes(cancel);
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
            await PutAndPass(query, token);
            var value = parse(_outlet.Reply(await _replies.ReadLine(token)));
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

    private async ValueTask<IReadOnlyList<ErrorEntry>> EmptyQueue(string query, CancellationToken cancel)
    {
        var confirmed = _settingDown.Count;
        List<ErrorEntry>? entries = null;
        for (var n = 0; n < MostErrors; n++)
        {
            var entry = await Exchange(query, ErrorEntry.Parse, cancel);
            if (entry.IsNone)
            {
                Confirm(confirmed);
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

            _outlet.ForgetEchoes();
            var dropped = await _resynchronisation.Run(q => _outlet.Ask(q), asks: !Habits.ReopensToRecover, cancel);
            _outlet.ForgetEchoes();
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

    /// <summary>Sends a question and reads what the instrument echoes before its reply.</summary>
    private ValueTask PutAndPass(string query, CancellationToken token) =>
        _outlet.Pass(_outlet.Ask(query), _replies, token);

    /// <summary>Reads the echoes of commands that were sent since the last question; where they do not come, the link is
    /// in doubt.</summary>
    private async ValueTask PassEchoes(CancellationToken cancel)
    {
        _trust.Note("the echo of a command");
        var token = _deadline.Start(_options.ReplyWithin, cancel);
        try
        {
            await _outlet.Pass(null, _replies, token);
            _trust.Restore();
        }
        catch (Exception e) when (e is ReplyException || (e is OperationCanceledException && !cancel.IsCancellationRequested))
        {
            _trust.Doubt($"a command was not echoed as it should be: {e.Message}");
        }
        catch (LinkException e)
        {
            throw _trust.Break(e);
        }
        finally
        {
            _deadline.End();
        }
    }

    /// <summary>A question that the instrument may not know, the error queue right behind it.</summary>
    private async ValueTask<(string? Answer, ErrorEntry Error)> AskBoth(
        string query, string errors, CancellationToken token)
    {
        await PutAndPass(query, token);
        var echoes = _outlet.Ask(errors);
        var line = await _replies.ReadLine(token);
        if (echoes > 0 && Ascii.Equals(line.Span, errors))
        {
            // The question was refused: what came is the echo of the second one.
            _outlet.ForgetEchoes();
            return (null, ErrorEntry.Parse((await _replies.ReadLine(token)).Span));
        }

        if (ErrorEntry.IsOne(line.Span))
        {
            return (null, ErrorEntry.Parse(line.Span));
        }

        var answer = Encoding.UTF8.GetString(line.Span);
        await _outlet.Pass(echoes, _replies, token);
        return (answer, ErrorEntry.Parse((await _replies.ReadLine(token)).Span));
    }

    /// <summary>The same where a second question would make the reply to the first one void; the status byte says what
    /// became of it.</summary>
    private async ValueTask<(string? Answer, ErrorEntry Error)> AskInTurn(
        string query, string errors, CancellationToken token)
    {
        _outlet.Ask(query);
        var answer = await IsAnswered(token)
            ? Encoding.UTF8.GetString((await _replies.ReadLine(token)).Span) : null;
        _outlet.Ask(errors);
        return (answer, ErrorEntry.Parse((await _replies.ReadLine(token)).Span));
    }

    /// <summary>Takes note that what set down was obeyed.</summary>
    private void Confirm(int count)
    {
        while (count-- > 0)
        {
            _settingDown.TryDequeue(out _);
        }
    }

    /// <summary>Where there is no error queue: waits until what was sent has been done, if the instrument can say
    /// so.</summary>
    private async ValueTask<IReadOnlyList<ErrorEntry>> Complete(CancellationToken cancel)
    {
        if (Habits.HasOperationComplete)
        {
            var confirmed = _settingDown.Count;
            await Exchange("*OPC?", ReplyInteger.Parse, cancel);
            Confirm(confirmed);
        }

        return [];
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
