using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Files;

/// <summary>The columns of one text table that are wanted, read in one pass.</summary>
internal sealed partial class CsvTable
{
    /// <summary>Lines in which a header is looked for: what instruments write before it is shorter.</summary>
    private const int MostLinesBefore = 200;

    private readonly string _file;
    private readonly WaveformFileOptions _options;
    private readonly IReadOnlyList<ChannelMapping> _mappings;
    private readonly List<WaveformProblem> _problems;
    private readonly CsvLines _lines;
    private readonly int _before;
    private readonly List<(int Column, Channel? Channel)> _wanted = [];
    private readonly TimeGrid _times = new();
    private readonly int _filledLines;
    private double[][] _values = [];
    private int _filled;
    private int _rows;
    private int _firstLine;

    private CsvTable(
        Stream stream,
        string file,
        WaveformFileOptions options,
        IReadOnlyList<ChannelMapping> mappings,
        List<WaveformProblem> problems,
        int filledLines)
    {
        (_file, _options, _mappings, _problems) = (file, options, mappings, problems);
        _filledLines = filledLines;
        _lines = new CsvLines(stream, options.MostBytes);
        _before = problems.Count;
    }

    /// <summary>The channels found.</summary>
    public Dictionary<Channel, double[]> Channels { get; } = [];

    /// <summary>The time base.</summary>
    public TimeBase Time { get; private set; }

    /// <summary>Rows read.</summary>
    public int Count => _rows;

    private bool HasProblems => _problems.Count > _before;

    /// <summary>Reads a table.</summary>
    /// <param name="stream">The text, unpacked.</param>
    /// <param name="file">The file's name in messages.</param>
    /// <param name="options">Interval and bounds.</param>
    /// <param name="mappings">The mappings that concern this file.</param>
    /// <param name="problems">Receives problems.</param>
    /// <param name="filledLines">How many lines are not empty, so that no more memory is taken than the table needs;
    /// 0: not known.</param>
    /// <returns>The table; null where there were problems.</returns>
    public static CsvTable? Read(
        Stream stream,
        string file,
        WaveformFileOptions options,
        IReadOnlyList<ChannelMapping> mappings,
        List<WaveformProblem> problems,
        int filledLines = 0)
    {
        CsvTable table = new(stream, file, options, mappings, problems, filledLines);
        table.ReadAll();
        return table.HasProblems ? null : table;
    }

    private void ReadAll()
    {
        if (FindHeader(out ReadOnlySpan<byte> pending) is not { } header || !Choose(header))
        {
            return;
        }

        bool ended = false;
        if (!pending.IsEmpty)
        {
            Add(pending, header);
        }

        while (_problems.Count < WaveformRead.MostProblems && _rows <= _options.MostRows
            && Next(out ReadOnlySpan<byte> line))
        {
            if (Csv.IsEmpty(line))
            {
                ended |= _rows > 0;
            }
            else if (ended)
            {
                Report(0, "a row behind an empty line", "rows one after the other", "remove the empty line");
                return;
            }
            else if (_rows > 0 || !CsvHeader.Of(line, _lines.Number).IsUnits())
            {
                Add(line, header);
            }
        }

        Finish();
    }

    /// <summary>Reads on to the header; a line of numbers before it means that there is none.</summary>
    /// <param name="pending">Receives the line where it is data already.</param>
    private CsvHeader? FindHeader(out ReadOnlySpan<byte> pending)
    {
        CsvHeader? before = null, perhaps = null;
        string? firstLine = null;
        string[] wanted = [.. _mappings.Select(mapping => mapping.Column)];
        pending = default;
        while (_lines.Number < MostLinesBefore && Next(out ReadOnlySpan<byte> line))
        {
            line = _lines.Number == 1 && line.StartsWith("\uFEFF"u8) ? line[3..] : line;
            firstLine ??= Csv.Show(line);
            if (line.IndexOfAny((byte)0, (byte)'\r') is var odd && odd >= 0)
            {
                ReportAt(_lines.Number, odd + 1, line[odd] == 0 ? "a NUL byte" : "a carriage return inside a line",
                    "a text table in UTF-8", "save it as text in UTF-8, with the usual line ends");
                return null;
            }

            if (Csv.IsEmpty(line))
            {
                continue;
            }

            CsvHeader header = CsvHeader.Of(line, _lines.Number);
            if (perhaps is not null && !header.IsUnits())
            {
                if (perhaps.CanStandAbove(header))
                {
                    pending = line;
                    return perhaps;
                }

                perhaps = null;
            }

            bool data = header.IsData();
            if (!data && header.Knows(wanted))
            {
                if (header.IsSurely(wanted))
                {
                    return header;
                }

                perhaps = header;
            }

            if (data && _mappings.Count > 0)
            {
                pending = line;
                return before is not null && before.Names.Length == header.Names.Length ? before : header.Unnamed();
            }

            before = header;
        }

        if (!HasProblems)
        {
            ReportAt(
                1,
                1,
                firstLine is null ? "the file is empty" : $"'{firstLine}'",
                $"a header line with t and some of {Csv.Names}",
                "name the columns, or say which they are by --channel NAME=COLUMN");
        }

        return null;
    }

    private void Finish()
    {
        if (HasProblems)
        {
            return;
        }

        if (_rows == 0 || (_rows == 1 && _options.Interval is null))
        {
            ReportAt(
                Math.Max(1, _lines.Number), 0, $"{Counted(_rows, "row")} of data", "at least two",
                "is the file cut short?");
            return;
        }

        if (_options.Interval is { } interval)
        {
            Time = new TimeBase(_times.First, interval);
        }
        else if (_times.Base(out int row, out string found) is { } time)
        {
            Time = time;
        }
        else
        {
            ReportAt(
                _firstLine + row, 1, found, "times that rise by equal intervals",
                "resample the record, or state the interval by --interval if the times are wrong");
        }

        for (int i = 0; i < _wanted.Count; i++)
        {
            if (_wanted[i].Channel is { } channel)
            {
                Array.Resize(ref _values[i], _rows);
                Channels[channel] = _values[i];
                _values[i] = [];
            }
        }
    }

    private bool Next(out ReadOnlySpan<byte> line)
    {
        switch (_lines.TryRead(out line))
        {
            case CsvLines.Stop.None:
                _filled += Csv.IsEmpty(line) ? 0 : 1;
                return true;
            case CsvLines.Stop.LineTooLong:
                Report(0, "a line of more than 64 kB", "rows of a text table", "is this a waveform file?");
                return false;
            case CsvLines.Stop.TextTooLong:
                Report(0, $"more than {_options.MostBytes} bytes", "fewer", "cut the record to the pulse train");
                return false;
            default:
                return false;
        }
    }

    private static string Counted(int count, string what) => count == 1 ? $"1 {what}" : $"{count} {what}s";

    private void Report(int column, string found, string expected, string advice) =>
        ReportAt(_lines.Number, column, found, expected, advice);

    private void ReportAt(int line, int column, string found, string expected, string advice)
    {
        if (_problems.Count < WaveformRead.MostProblems)
        {
            _problems.Add(new WaveformProblem(_file, line, column, found, expected, advice));
        }
    }
}
