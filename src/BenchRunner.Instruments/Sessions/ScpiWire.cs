using System.Runtime.CompilerServices;
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
    private const string OpeningTheLine = "opening the line";

    private readonly ILink _link;
    private readonly SessionOptions _options;
    private readonly Action<InstrumentEventKind, string> _report;
    private readonly WireTrust _trust;
    private readonly ReplyStream _replies;
    private readonly Deadline _deadline;
    private readonly Resynchronisation _resynchronisation;
    private readonly Outlet _outlet;
    private readonly Exchanges _exchanges;
    private readonly Probing _probing;
    private readonly ErrorQueue _errors;
    private readonly NumberedQuestion _numbered = new();
    private readonly Unconfirmed _down = new();

    /// <summary>Takes over a link that was just opened.</summary>
    /// <param name="link">The link; closed with the wire, or when it breaks.</param>
    /// <param name="options">Bounds.</param>
    /// <param name="time">The clock of all deadlines.</param>
    /// <param name="report">Told what happens; from any thread.</param>
    public ScpiWire(ILink link, SessionOptions options, TimeProvider time, Action<InstrumentEventKind, string> report)
    {
        (_link, _options, _report) = (link, options, report);
        if (link.KeepsMessages)
        {
            link.Discarded += what => report(InstrumentEventKind.Discarded, what);
        }

        _trust = new WireTrust(link, options.ReplyWithin, report);
        _replies = new ReplyStream(link, options.Habits);
        _outlet = new Outlet(link, _trust, options.Habits);
        _deadline = new Deadline(time);
        _resynchronisation = new Resynchronisation(link, _replies, _deadline, options, time);
        _exchanges = new Exchanges(link, _outlet, _replies, _deadline, _trust, options);
        _probing = new Probing(_exchanges, link, _outlet, _replies, _deadline, _trust, options.Habits, time);
        _errors = new ErrorQueue(_exchanges, _down, _trust, options.Habits, link.Name);
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
        _errors.Sending();
        _outlet.Tell(command);
    }

    /// <summary>Sends one message that sets down. From any thread; never waits for an exchange.</summary>
    /// <inheritdoc cref="Send" path="/exception"/>
    public void SendDown(string command)
    {
        if (_link.KeepsMessages)
        {
            _down.Add(command);
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
        return await _exchanges.Line(query, parse, cancel);
    }

    /// <summary>Asks one question with a number that its reply must bring back.</summary>
    /// <returns>The answer, and whether the instrument was switched on since it was asked so before.</returns>
    public async ValueTask<(T Answer, bool SwitchedOn)> AskNumbered<T>(
        string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        await Ready(cancel);
        var answer = await _exchanges.Line(_numbered.Next(query), reply => _numbered.Parse(reply, parse), cancel);
        return (answer, _numbered.SwitchedOn);
    }

    /// <summary>Asks one question and reads its reply, a block, into a pooled buffer.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> AskBlock<T>(string query, int bound, ReplyParser<T> parse, CancellationToken cancel)
    {
        await Ready(cancel);
        return await _exchanges.Block(query, bound, parse, cancel);
    }

    /// <summary>Asks a question that the instrument may not know, and the error queue right behind it, so that a
    /// refusal shows at once.</summary>
    /// <returns>The answer, null where the question was refused, and the entry of the error queue.</returns>
    public async ValueTask<(string? Answer, ErrorEntry Error)> Probe(string query, CancellationToken cancel)
    {
        await Ready(cancel);
        return await _probing.Ask(query, cancel);
    }

    /// <summary>Reads the error queue until it is empty.</summary>
    /// <exception cref="LinkException">It does not get empty, or the link failed.</exception>
    public async ValueTask<IReadOnlyList<ErrorEntry>> ReadErrors(CancellationToken cancel)
    {
        if (_trust.WhyNot is not null)
        {
            await Resynchronise(cancel);
        }

        return await _errors.ReadEmpty(cancel);
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

        if (_trust.WhyNot is not null || _errors.IsUnread)
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
            foreach (var command in _down.ToArray())
            {
                Send(command);
            }
        }
        finally
        {
            _deadline.End();
        }
    }

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
