using System.Runtime.CompilerServices;
using System.Runtime.ExceptionServices;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Questions and their replies on a wire that is not in doubt, each under one deadline; what ends one before its
/// whole reply was read leaves a doubt standing. One owner at a time.</summary>
/// <param name="link">The link.</param>
/// <param name="outlet">Writes to it.</param>
/// <param name="replies">Reads from it.</param>
/// <param name="deadline">The deadline.</param>
/// <param name="trust">Takes the doubt.</param>
/// <param name="options">Bounds.</param>
internal sealed class Exchanges(
    ILink link, Outlet outlet, ReplyStream replies, Deadline deadline, WireTrust trust, SessionOptions options)
{
    // A block has come to be announced: its length extends the deadline.
    private readonly Action<int> _extend = length =>
        deadline.Extend(options.ReplyWithin + TimeSpan.FromSeconds(length / options.BlockRate));

    /// <summary>Asks one question and reads its reply, a line.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> Line<T>(string query, ReplyParser<T> parse, CancellationToken cancel)
    {
        var token = Begin(query, cancel);
        try
        {
            await PutAndPass(query, token);
            var value = parse(outlet.Reply(await replies.ReadLine(token)));
            Finish(query);
            return value;
        }
        catch (Exception e)
        {
            ExceptionDispatchInfo.Throw(trust.Failure(e, query, cancel));
            throw;
        }
        finally
        {
            deadline.End();
        }
    }

    /// <summary>Asks one question and reads its reply, a block, into a pooled buffer.</summary>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> Block<T>(string query, int bound, ReplyParser<T> parse, CancellationToken cancel)
    {
        var token = Begin(query, cancel);
        try
        {
            await PutAndPass(query, token);
            await replies.ReadBlock(bound, _extend, token);
            var value = parse(replies.Blocks.Block(0));
            Finish(query);
            return value;
        }
        catch (Exception e)
        {
            // With its link lost nothing more comes; inside a block on a stream no end could be told from data: either
            // way only a new connection helps, and what is missing says more than how the link ended.
            if (e is LinkException
                || (!link.KeepsMessages && replies.Blocks.Announced is not null && !replies.Blocks.IsWhole))
            {
                trust.Break(new LinkException(
                    link.Name, $"reply to '{query}' is {replies.Blocks.Missing().Message}", e));
            }

            var echo = e is ReplyException && replies.Blocks.Head.StartsWith(outlet.Question);
            var why = echo ? new ReplyException(ReplyFault.Echo, query) : e;
            ExceptionDispatchInfo.Throw(trust.Failure(why, query, cancel));
            throw;
        }
        finally
        {
            deadline.End();
            replies.Blocks.Dispose();
        }
    }

    /// <summary>Starts the deadline of a question; the doubt stands from here on.</summary>
    public CancellationToken Begin(string query, CancellationToken cancel)
    {
        trust.Note(query);
        return deadline.Start(options.ReplyWithin, cancel);
    }

    /// <summary>Sends a question and reads what the instrument echoes before its reply.</summary>
    public ValueTask PutAndPass(string query, CancellationToken token) =>
        outlet.Pass(outlet.Ask(query), replies, token);

    /// <summary>Takes the doubt back, unless more came than was asked for.</summary>
    public void Finish(string query)
    {
        trust.Restore();
        if (replies.HoldsReply)
        {
            trust.Doubt($"more than one reply to '{query}'");
        }
    }
}
