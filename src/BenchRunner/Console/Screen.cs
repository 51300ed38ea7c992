using System.Collections.Concurrent;
using System.Text;

namespace BenchRunner.Console;

/// <summary>Lines, and on a terminal one live line below them. In a pipe it writes lines alone, without control
/// codes.</summary>
/// <remarks>
/// A thread of its own writes, in the order asked for: a terminal that was stopped (Ctrl-S) or a reader that does not
/// read must not hold up the run, least of all its way to the safe state, and takes no thread from the watch.
/// </remarks>
internal sealed class Screen : IAsyncDisposable
{
    private const string ClearLine = "\r\u001b[2K";
    private readonly TextWriter _writer;
    private readonly bool _isTerminal;
    private readonly BlockingCollection<Action> _asked = [];
    private readonly TaskCompletionSource _written = new(TaskCreationOptions.RunContinuationsAsynchronously);
    private string _live = "";

    private Screen(TextWriter writer, bool isTerminal)
    {
        _writer = writer;
        _isTerminal = isTerminal;
        Palette = new Palette(isTerminal && Environment.GetEnvironmentVariable("NO_COLOR") is null or "");
        new Thread(Write) { IsBackground = true, Name = "screen" }.Start();
    }

    /// <summary>Colours for this screen.</summary>
    public Palette Palette { get; }

    /// <summary>A screen on standard output or standard error.</summary>
    public static Screen Standard(bool error) => error
        ? new Screen(System.Console.Error, !System.Console.IsErrorRedirected)
        : new Screen(System.Console.Out, !System.Console.IsOutputRedirected);

    /// <summary>Writes a line above the live line.</summary>
    public void Line(string text) => Ask(() =>
    {
        _writer.Write(_isTerminal && _live.Length > 0 ? ClearLine : "");
        _writer.WriteLine(text);
        _writer.Write(_isTerminal ? _live : "");
    });

    /// <summary>Replaces the live line; does nothing in a pipe.</summary>
    public void Live(string text)
    {
        if (_isTerminal)
        {
            Ask(() =>
            {
                // Four columns stay free, or a terminal's echo of ^C would wrap the line.
                int room = Math.Max(WindowWidth() - 4, 10);
                _live = text.Length > room ? text[..room] : text;
                _writer.Write(ClearLine + _live);
            });
        }
    }

    /// <summary>Rings the terminal's bell; does nothing in a pipe or file.</summary>
    public void Bell()
    {
        if (_isTerminal)
        {
            Ask(() => _writer.Write('\a'));
        }
    }

    /// <summary>Takes the live line away.</summary>
    public void EndLive() => Ask(() =>
    {
        _writer.Write(_live.Length > 0 ? ClearLine : "");
        _live = "";
    });

    /// <summary>Waits until all that was asked for so far is written.</summary>
    public Task Written(CancellationToken cancel)
    {
        var written = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
        return Ask(written.SetResult) ? written.Task.WaitAsync(cancel) : _written.Task;
    }

    /// <summary>Writes what was asked for and ends.</summary>
    public async ValueTask DisposeAsync()
    {
        EndLive();
        _asked.CompleteAdding();
        await _written.Task;
    }

    /// <returns>False: it has ended.</returns>
    private bool Ask(Action write)
    {
        try
        {
            _asked.Add(write);
            return true;
        }
        catch (InvalidOperationException)
        {
            return false;
        }
    }

    private void Write()
    {
        foreach (Action write in _asked.GetConsumingEnumerable())
        {
            try
            {
                write();
                _writer.Flush();
            }
            catch (Exception)
            {
                // Nobody reads any more, or whatever it is: the evidence has it all.
            }
        }

        _written.SetResult();
    }

    /// <summary>One line of printable text: what instruments say must not move the cursor or forge a line.</summary>
    public static string Printable(string text)
    {
        if (!text.Any(IsUnsafe))
        {
            return text;
        }

        var safe = new StringBuilder(text.Length + 8);
        foreach (char c in text)
        {
            safe.Append(IsUnsafe(c) ? $"\\u{(int)c:x4}" : c.ToString());
        }

        return safe.ToString();
    }

    // Controls C0 and C1, and the characters that turn the direction of writing.
    private static bool IsUnsafe(char c) =>
        char.IsControl(c)
        || c is (>= '\u202a' and <= '\u202e') or (>= '\u2066' and <= '\u2069') or '\u2028' or '\u2029';

    private static int WindowWidth()
    {
        try
        {
            return System.Console.WindowWidth;
        }
        catch (IOException)
        {
            return 80;
        }
    }
}
