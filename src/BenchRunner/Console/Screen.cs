using System.Text;

namespace BenchRunner.Console;

/// <summary>Lines, and on a terminal one live line below them. In a pipe it writes lines alone, without control codes.</summary>
internal sealed class Screen(TextWriter writer, bool isTerminal, Func<int> width)
{
    private const string ClearLine = "\r\u001b[2K";
    private readonly Lock _gate = new();
    private string _live = "";

    /// <summary>Colours for this screen.</summary>
    public Palette Palette { get; } = new(isTerminal && Environment.GetEnvironmentVariable("NO_COLOR") is null or "");

    /// <summary>A screen on standard output or standard error.</summary>
    public static Screen Standard(bool error) => error
        ? new Screen(System.Console.Error, !System.Console.IsErrorRedirected, WindowWidth)
        : new Screen(System.Console.Out, !System.Console.IsOutputRedirected, WindowWidth);

    /// <summary>Writes a line above the live line.</summary>
    public void Line(string text)
    {
        lock (_gate)
        {
            writer.Write(isTerminal && _live.Length > 0 ? ClearLine : "");
            writer.WriteLine(text);
            writer.Write(isTerminal ? _live : "");
            writer.Flush();
        }
    }

    /// <summary>Replaces the live line; does nothing in a pipe.</summary>
    public void Live(string text)
    {
        if (!isTerminal)
        {
            return;
        }

        lock (_gate)
        {
            // Four columns stay free, or a terminal's echo of ^C would wrap the line.
            int room = Math.Max(width() - 4, 10);
            _live = text.Length > room ? text[..room] : text;
            writer.Write(ClearLine + _live);
            writer.Flush();
        }
    }

    /// <summary>Takes the live line away.</summary>
    public void EndLive()
    {
        lock (_gate)
        {
            if (_live.Length > 0)
            {
                _live = "";
                writer.Write(ClearLine);
                writer.Flush();
            }
        }
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
        char.IsControl(c) || c is (>= '\u202a' and <= '\u202e') or (>= '\u2066' and <= '\u2069') or '\u2028' or '\u2029';

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
