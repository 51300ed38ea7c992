using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>The error queue of an instrument: whether it may hold something new, and reading it empty, which confirms what
/// was sent.</summary>
/// <param name="exchanges">Asks.</param>
/// <param name="down">What sets down and was not confirmed.</param>
/// <param name="trust">Broken by a queue that does not get empty.</param>
/// <param name="habits">How it is asked for, or that there is none.</param>
/// <param name="name">The link as the bench file names it.</param>
internal sealed class ErrorQueue(
    Exchanges exchanges, Unconfirmed down, WireTrust trust, WireHabits habits, string name)
{
    private const int MostEntries = 64;

    private volatile bool _isUnread;

    /// <summary>Whether something was sent since it was read empty.</summary>
    public bool IsUnread => _isUnread;

    /// <summary>Takes note that a command goes out. From any thread.</summary>
    public void Sending() => _isUnread = true;

    /// <summary>Reads it until it is empty.</summary>
    /// <exception cref="LinkException">It does not get empty, or the link failed.</exception>
    public async ValueTask<IReadOnlyList<ErrorEntry>> ReadEmpty(CancellationToken cancel)
    {
        // Taken back first: a command that another thread sends meanwhile sets it again.
        _isUnread = false;
        try
        {
            return habits.ErrorQuery is { } query ? await Entries(query, cancel) : await Complete(cancel);
        }
        catch
        {
            _isUnread = true;
            throw;
        }
    }

    private async ValueTask<IReadOnlyList<ErrorEntry>> Entries(string query, CancellationToken cancel)
    {
        var confirmed = down.Count;
        List<ErrorEntry>? entries = null;
        for (var n = 0; n < MostEntries; n++)
        {
            var entry = await exchanges.Line(query, ErrorEntry.Parse, cancel);
            if (entry.IsNone)
            {
                down.Confirm(confirmed);
                return entries ?? (IReadOnlyList<ErrorEntry>)[];
            }

            (entries ??= []).Add(entry);
        }

        throw trust.Break(new LinkException(
            name, $"the error queue is not empty after {MostEntries} entries, last {entries![^1]}"));
    }

    /// <summary>Where there is no error queue: waits until what was sent has been done, if the instrument can say
    /// so.</summary>
    private async ValueTask<IReadOnlyList<ErrorEntry>> Complete(CancellationToken cancel)
    {
        if (habits.HasOperationComplete)
        {
            var confirmed = down.Count;
            await exchanges.Line("*OPC?", ReplyInteger.Parse, cancel);
            down.Confirm(confirmed);
        }

        return [];
    }
}
