using System.Runtime.ExceptionServices;
using System.Text;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Questions that an instrument may not know: the error queue is asked right behind, so that a refusal shows at
/// once and not as a silence.</summary>
/// <param name="exchanges">Begins and ends what is asked.</param>
/// <param name="link">The link.</param>
/// <param name="outlet">Writes to it.</param>
/// <param name="replies">Reads from it.</param>
/// <param name="deadline">The deadline.</param>
/// <param name="trust">Takes the doubt.</param>
/// <param name="habits">How the error queue is asked for, or that there is none.</param>
/// <param name="time">The clock.</param>
internal sealed class Probing(
    Exchanges exchanges,
    ILink link,
    Outlet outlet,
    ReplyStream replies,
    Deadline deadline,
    WireTrust trust,
    WireHabits habits,
    TimeProvider time)
{
    private static readonly TimeSpan Pause = TimeSpan.FromMilliseconds(1);
    private static readonly ErrorEntry NoEntry = new(0, null, null);

    /// <summary>Asks one.</summary>
    /// <returns>The answer, null where the question was refused, and the entry of the error queue.</returns>
    public async ValueTask<(string? Answer, ErrorEntry Error)> Ask(string query, CancellationToken cancel)
    {
        var token = exchanges.Begin(query, cancel);
        try
        {
            (string? Answer, ErrorEntry Error) both;
            if (habits.ErrorQuery is { } errors)
            {
                both = link.KeepsMessages
                    ? await AskInTurn(query, errors, token) : await AskBoth(query, errors, token);
            }
            else
            {
                await exchanges.PutAndPass(query, token);
                both = (Encoding.UTF8.GetString((await replies.ReadLine(token)).Span), NoEntry);
            }

            exchanges.Finish(query);
            return both;
        }
        catch (OperationCanceledException) when (habits.ErrorQuery is null && !cancel.IsCancellationRequested)
        {
            // Without an error queue an instrument refuses by silence. The doubt stands: its answer may only be late.
            return (null, NoEntry);
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

    /// <summary>On a stream, both at once.</summary>
    private async ValueTask<(string? Answer, ErrorEntry Error)> AskBoth(
        string query, string errors, CancellationToken token)
    {
        await exchanges.PutAndPass(query, token);
        var echoes = outlet.Ask(errors);
        var line = await replies.ReadLine(token);
        if (echoes > 0 && Ascii.Equals(line.Span, errors))
        {
            // The question was refused: what came is the echo of the second one.
            outlet.ForgetEchoes();
            return (null, ErrorEntry.Parse((await replies.ReadLine(token)).Span));
        }

        if (ErrorEntry.IsOne(line.Span))
        {
            return (null, ErrorEntry.Parse(line.Span));
        }

        var answer = Encoding.UTF8.GetString(line.Span);
        await outlet.Pass(echoes, replies, token);
        return (answer, ErrorEntry.Parse((await replies.ReadLine(token)).Span));
    }

    /// <summary>Where a second question would make the reply to the first one void; the status byte says what became of
    /// it.</summary>
    private async ValueTask<(string? Answer, ErrorEntry Error)> AskInTurn(
        string query, string errors, CancellationToken token)
    {
        outlet.Ask(query);
        var answer = await IsAnswered(token)
            ? Encoding.UTF8.GetString((await replies.ReadLine(token)).Span) : null;
        outlet.Ask(errors);
        return (answer, ErrorEntry.Parse((await replies.ReadLine(token)).Span));
    }

    /// <summary>Waits until a reply comes or the error queue holds why none does.</summary>
    private async ValueTask<bool> IsAnswered(CancellationToken cancel)
    {
        const byte ErrorQueue = 1 << 2;
        const byte MessageAvailable = 1 << 4;
        while (!link.HasInput)
        {
            var status = await link.ReadStatus(cancel);
            if ((status & (ErrorQueue | MessageAvailable)) == ErrorQueue && !link.HasInput)
            {
                return false;
            }

            await Task.Delay(Pause, time, cancel);
        }

        return true;
    }
}
