namespace BenchRunner.Signals.Files;

/// <summary>Lines of a text, one after the other, out of one buffer of fixed size.</summary>
internal sealed class CsvLines(Stream stream, long mostBytes)
{
    private const int BufferSize = 1 << 18;

    /// <summary>The longest line: longer ones are no rows of a table.</summary>
    private const int MostLine = 1 << 16;

    private readonly byte[] _buffer = new byte[BufferSize];
    private int _start;
    private int _end;
    private long _read;
    private bool _ended;

    /// <summary>Why there is no next line.</summary>
    public enum Stop
    {
        /// <summary>There is one.</summary>
        None,

        /// <summary>The text ended.</summary>
        End,

        /// <summary>The line is longer than any row.</summary>
        LineTooLong,

        /// <summary>The text is longer than allowed.</summary>
        TextTooLong,
    }

    /// <summary>Lines of a text that are not empty, up to where it can be read no further.</summary>
    public static int CountFilled(Stream stream, long mostBytes)
    {
        CsvLines lines = new(stream, mostBytes);
        int filled = 0;
        while (lines.TryRead(out ReadOnlySpan<byte> line) == Stop.None)
        {
            filled += Csv.IsEmpty(line) ? 0 : 1;
        }

        return filled;
    }

    /// <summary>Number of the line read last, from 1.</summary>
    public int Number { get; private set; }

    /// <summary>Reads the next line.</summary>
    /// <param name="line">Receives the line without its end; valid until the next call.</param>
    public Stop TryRead(out ReadOnlySpan<byte> line)
    {
        int searched = 0;
        line = default;
        while (true)
        {
            ReadOnlySpan<byte> held = _buffer.AsSpan(_start, _end - _start);
            int end = held[searched..].IndexOf((byte)'\n');
            if (end >= 0 || (_ended && !held.IsEmpty))
            {
                line = end >= 0 ? held[..(searched + end)] : held;
                _start += line.Length + (end >= 0 ? 1 : 0);
                Number++;
                line = line.Length > 0 && line[^1] == '\r' ? line[..^1] : line;
                return line.Length > MostLine ? Stop.LineTooLong : Stop.None;
            }

            if (_ended)
            {
                return Stop.End;
            }

            if (held.Length > MostLine)
            {
                Number++;
                return Stop.LineTooLong;
            }

            searched = held.Length;
            if (_read > mostBytes)
            {
                Number++;
                return Stop.TextTooLong;
            }

            Fill();
        }
    }

    private void Fill()
    {
        _buffer.AsSpan(_start, _end - _start).CopyTo(_buffer);
        _end -= _start;
        _start = 0;
        int count = stream.Read(_buffer, _end, _buffer.Length - _end);
        _ended = count == 0;
        _end += count;
        _read += count;
    }
}
