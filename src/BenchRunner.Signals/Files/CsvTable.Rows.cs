namespace BenchRunner.Signals.Files;

/// <content>The rows: fields into arrays.</content>
internal sealed partial class CsvTable
{
    private void Add(ReadOnlySpan<byte> line, CsvHeader header)
    {
        if (_rows >= _options.MostRows)
        {
            Report(0, $"more than {_options.MostRows} rows", "fewer", "cut the record to the pulse train");
            _rows++;
            return;
        }

        _firstLine = _rows == 0 ? _lines.Number : _firstLine;
        MakeRoom();
        ReadOnlySpan<byte> rest = line;
        int column = 0;
        bool more = true;
        for (; more && column < header.Names.Length; column++)
        {
            int start = line.Length - rest.Length + 1;
            ReadOnlySpan<byte> field = Csv.Field(ref rest, header.Separator, out more);
            for (int i = 0; i < _wanted.Count; i++)
            {
                if (_wanted[i].Column == column)
                {
                    Take(i, field, header, start);
                }
            }
        }

        if (column < header.Names.Length || (more && !Csv.IsEmpty(rest)))
        {
            int fields = column + (more ? 1 + rest.Count(header.Separator) : 0);
            Report(
                0, $"{Counted(fields, "field")}", $"{header.Names.Length} as in the header",
                more && header.Separator == ','
                    ? "correct the row; where the comma is the decimal sign, part the fields by ; or tab"
                    : "complete or remove the row");
        }

        _rows++;
    }

    /// <summary>Makes room for one more row; at the first one for all that are to come.</summary>
    private void MakeRoom()
    {
        if (_rows == 0)
        {
            int rows = _filledLines == 0 ? 1024 : Math.Clamp(_filledLines - _filled + 1, 1, _options.MostRows);
            _values = [.. _wanted.Select(wanted => wanted.Channel is null ? [] : new double[rows])];
        }

        for (int i = 0; i < _values.Length; i++)
        {
            if (_wanted[i].Channel is not null && _rows == _values[i].Length)
            {
                Array.Resize(ref _values[i], _rows * 2);
            }
        }
    }

    private void Take(int wanted, ReadOnlySpan<byte> field, CsvHeader header, int start)
    {
        if (_wanted[wanted].Channel is not null)
        {
            _values[wanted][_rows] = Number(field, header, start, isTime: false);
        }
        else
        {
            _times.Add(Number(field, header, start, isTime: true));
        }
    }

    private double Number(ReadOnlySpan<byte> field, CsvHeader header, int start, bool isTime)
    {
        if (Csv.TryNumber(field, header.DecimalComma, out double value) && (!isTime || double.IsFinite(value)))
        {
            return value;
        }

        Report(
            start,
            field.IsEmpty ? "an empty field" : $"'{Csv.Show(field)}'",
            isTime ? "a time in s" : "a number in V or A",
            isTime
                ? "correct it, or state the interval by --interval and leave the times out"
                : "correct it, or write inf or nan for a clipped sample");
        return 0;
    }
}
