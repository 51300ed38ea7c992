using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Files;

/// <content>Which columns are wanted.</content>
internal sealed partial class CsvTable
{
    /// <summary>Decides which columns are read.</summary>
    private bool Choose(CsvHeader header)
    {
        ChooseTime(header);
        foreach (ChannelMapping mapping in _mappings)
        {
            if (header.Find(mapping.Column) is { } column)
            {
                Want(header, column, mapping.Channel);
            }
            else
            {
                ReportAt(
                    Math.Max(1, header.Line),
                    1,
                    $"no column '{Csv.Show(mapping.Column)}'",
                    $"one of {string.Join(", ", header.Names.Take(12))}, or a number up to {header.Names.Length}",
                    $"correct --channel {mapping.Channel.Name()}=…");
            }
        }

        for (int i = 0; i < header.Names.Length; i++)
        {
            if (ChannelNames.Parse(header.Names[i]) is { } channel)
            {
                if (!_mappings.Any(mapping => mapping.Channel == channel || mapping.File is not null))
                {
                    Want(header, i, channel);
                }
            }
            else if (_options.Channels.Count == 0 && !(i == 0 && header.HasTime))
            {
                ReportAt(
                    header.Line,
                    header.Starts[i],
                    $"column '{Csv.Show(header.Names[i])}'",
                    $"one of {Csv.Names}",
                    "rename it, or say which columns to take by --channel NAME=COLUMN");
            }
        }

        if (!HasProblems && !_wanted.Exists(wanted => wanted.Channel is not null))
        {
            ReportAt(Math.Max(1, header.Line), 1, "no column of a channel", $"at least one of {Csv.Names}", "name one");
        }

        return !HasProblems;
    }

    private void ChooseTime(CsvHeader header)
    {
        bool named = header.HasTime;
        if (named || (_options.Interval is null && _options.Channels.Count > 0 && !IsChannel(header, 0)))
        {
            _wanted.Add((0, null));
        }
        else if (_options.Interval is null)
        {
            ReportAt(
                Math.Max(1, header.Line),
                1,
                $"first column '{Csv.Show(header.Names[0])}'",
                "the time column t",
                "add it, or state the sample interval by --interval");
        }
    }

    private bool IsChannel(CsvHeader header, int column) => ChannelNames.Parse(header.Names[column]) is not null
        || _mappings.Any(mapping => header.Find(mapping.Column) == column);

    private void Want(CsvHeader header, int column, Channel channel)
    {
        if (_wanted.Exists(wanted => wanted.Channel == channel))
        {
            ReportAt(
                Math.Max(1, header.Line), header.Starts[column], $"{channel.Name()} a second time", "each channel once",
                "rename or remove one");
        }
        else
        {
            _wanted.Add((column, channel));
        }
    }
}
