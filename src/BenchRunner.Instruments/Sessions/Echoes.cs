using System.Collections.Concurrent;
using System.Text;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>What an instrument with its echo on still has to send back, in the order in which it was written.</summary>
internal sealed class Echoes
{
    private readonly ConcurrentQueue<byte[]> _due = new();

    /// <summary>How many echoes have not come yet.</summary>
    public int Due => _due.Count;

    /// <summary>Notes a message before it is written. Under the caller's lock, so that order is that of the
    /// wire.</summary>
    public void Note(string message) => _due.Enqueue(Encoding.ASCII.GetBytes(message));

    /// <summary>Forgets what is due: a drain drops it.</summary>
    public void Forget() => _due.Clear();

    /// <summary>Reads the next echoes.</summary>
    /// <exception cref="ReplyException">Another line came.</exception>
    public async ValueTask Take(int count, ReplyStream replies, CancellationToken token)
    {
        for (; count > 0 && _due.TryPeek(out var due); count--)
        {
            var line = await replies.ReadLine(token);
            if (!line.Span.SequenceEqual(due))
            {
                throw new ReplyException(ReplyFault.NoEcho, line.Span);
            }

            _due.TryDequeue(out _);
        }
    }
}
