using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Writes messages to a link, each with its terminator, and knows which of them an instrument with its echo on
/// still has to send back. A write that fails breaks the wire.</summary>
internal sealed class Outlet(ILink link, WireTrust trust, WireHabits habits)
{
    private readonly ProgramMessage _question = new(habits.Terminator);
    private readonly Echoes? _echoes = habits.Echoes ? new Echoes() : null;

    /// <summary>The last question.</summary>
    public ReadOnlySpan<byte> Question => _question.Text;

    /// <summary>Whether echoes are due.</summary>
    public bool AwaitsEcho => _echoes is { Due: > 0 };

    /// <summary>Sends a question. One owner at a time.</summary>
    /// <returns>How many echoes are due up to its own.</returns>
    /// <exception cref="LinkException">The link is lost; the wire is broken.</exception>
    public int Ask(string query) => Write(query, _question.Write(query));

    /// <summary>Sends a message that has no reply. From any thread.</summary>
    /// <inheritdoc cref="Ask" path="/exception"/>
    public void Tell(string command)
    {
        Span<byte> message = stackalloc byte[ProgramMessage.Longest];
        Write(command, message[..ProgramMessage.Encode(command, habits.Terminator, message)]);
    }

    /// <summary>Ends whatever half message an earlier user left.</summary>
    /// <inheritdoc cref="Ask" path="/exception"/>
    public void Terminate() => Write(ProgramMessage.End(habits.Terminator));

    /// <summary>A line as the reply to the last question.</summary>
    /// <exception cref="ReplyException">The line is the question itself.</exception>
    public ReadOnlySpan<byte> Reply(ReadOnlyMemory<byte> line) => _question.Reply(line);

    /// <summary>Reads echoes that are due.</summary>
    /// <param name="count">How many; null: all of them.</param>
    /// <param name="replies">Where they come.</param>
    /// <param name="token">Ends the reading.</param>
    /// <exception cref="ReplyException">Another line came.</exception>
    public ValueTask Pass(int? count, ReplyStream replies, CancellationToken token) =>
        _echoes is { } echoes ? echoes.Take(count ?? echoes.Due, replies, token) : ValueTask.CompletedTask;

    /// <summary>Forgets the echoes that are due: a drain drops them.</summary>
    public void ForgetEchoes() => _echoes?.Forget();

    private int Write(string text, ReadOnlySpan<byte> message)
    {
        if (_echoes is not { } echoes)
        {
            Write(message);
            return 0;
        }

        lock (echoes)
        {
            echoes.Note(text);
            Write(message);
            return echoes.Due;
        }
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
            throw trust.Break(e);
        }
    }
}
