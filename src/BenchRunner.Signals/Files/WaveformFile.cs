using System.Globalization;
using System.IO.Compression;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Files;

/// <summary>Waveforms as text tables: a header line, times in s in a first column <c>t</c>, then channels in V and A.
/// </summary>
/// <remarks>
/// Plain or packed by gzip (told by its first bytes, not by its name). Fields are parted by commas, or by semicolons or
/// tabs, and with these the decimal sign may be a comma. Lines before the header are passed over, so is one line of
/// plain units behind it. <c>inf</c> and <c>nan</c> are clipped samples. Foreign tables are read by
/// <see cref="WaveformFileOptions"/>.
/// </remarks>
public static class WaveformFile
{
    /// <summary>How far the intervals of two files of one record may differ, 1.</summary>
    private const double SameInterval = 1e-6;

    /// <summary>Bytes from which on the rows are counted first: then no array has to grow, and the memory taken is that
    /// of the samples.</summary>
    private const int WorthCounting = 1 << 20;

    /// <summary>Reads a waveform file.</summary>
    /// <param name="path">The file.</param>
    /// <param name="options">How to read it; null: the house's own form.</param>
    /// <returns>The waveform, or the problems; a file that cannot be opened is one.</returns>
    public static WaveformRead Read(string path, WaveformFileOptions? options = null)
    {
        ArgumentNullException.ThrowIfNull(path);
        List<WaveformProblem> problems = [];
        return Combine(
            mappings => ReadPath(path, options ?? WaveformFileOptions.Default, mappings, problems),
            path,
            options ?? WaveformFileOptions.Default,
            problems);
    }

    /// <summary>Reads a waveform file from a stream.</summary>
    /// <param name="stream">The bytes, packed or plain; read to the end, not closed.</param>
    /// <param name="name">The file's name in messages.</param>
    /// <param name="options">How to read it; null: the house's own form.</param>
    /// <returns>The waveform, or the problems; never an exception for what the bytes are.</returns>
    public static WaveformRead Read(Stream stream, string name, WaveformFileOptions? options = null)
    {
        ArgumentNullException.ThrowIfNull(stream);
        ArgumentNullException.ThrowIfNull(name);
        List<WaveformProblem> problems = [];
        return Combine(
            mappings => ReadStream(stream, name, options ?? WaveformFileOptions.Default, mappings, problems),
            name,
            options ?? WaveformFileOptions.Default,
            problems);
    }

    /// <summary>Writes a waveform in the house's own form, plain; every sample comes back to the last bit.</summary>
    /// <param name="waveform">The waveform.</param>
    /// <param name="writer">Receives the text.</param>
    public static void Write(Waveform waveform, TextWriter writer)
    {
        ArgumentNullException.ThrowIfNull(waveform);
        ArgumentNullException.ThrowIfNull(writer);
        Channel[] channels = [.. waveform.Channels];
        writer.Write(CsvHeader.Time);
        foreach (Channel channel in channels)
        {
            writer.Write(',');
            writer.Write(channel.Name());
        }

        writer.Write('\n');
        for (int i = 0; i < waveform.Count; i++)
        {
            writer.Write(waveform.TimeAt(i).ToString("R", CultureInfo.InvariantCulture));
            foreach (Channel channel in channels)
            {
                writer.Write(',');
                writer.Write(waveform[channel][i].ToString("R", CultureInfo.InvariantCulture));
            }

            writer.Write('\n');
        }
    }

    private static WaveformRead Combine(
        Func<IReadOnlyList<ChannelMapping>, CsvTable?> readMain,
        string name,
        WaveformFileOptions options,
        List<WaveformProblem> problems)
    {
        if (options.Interval is { } interval && !(double.IsFinite(interval) && interval > 0))
        {
            string found = $"{interval.ToString(CultureInfo.InvariantCulture)} s";
            problems.Add(new WaveformProblem("--interval", 0, 0, found, "a time above 0", "correct it"));
            return new WaveformRead(null, problems);
        }

        if (options.Channels.GroupBy(mapping => mapping.Channel).FirstOrDefault(same => same.Count() > 1) is { } twice)
        {
            problems.Add(new WaveformProblem(
                $"--channel {twice.Key.Name()}", 0, 0, $"{twice.Count()} columns for one channel", "one",
                "leave the others out"));
            return new WaveformRead(null, problems);
        }

        CsvTable? main = readMain([.. options.Channels.Where(mapping => mapping.File is null)]);
        Dictionary<Channel, double[]> channels = main?.Channels ?? [];
        foreach (IGrouping<string?, ChannelMapping> file in options.Channels.GroupBy(mapping => mapping.File))
        {
            if (file.Key is { } path && ReadPath(path, options, [.. file], problems) is { } other && main is not null)
            {
                Join(channels, other, main, path, name, problems);
            }
        }

        return main is null || problems.Count > 0
            ? new WaveformRead(null, problems)
            : new WaveformRead(new Waveform(main.Time.Origin, main.Time.Interval, channels), []);
    }

    private static void Join(
        Dictionary<Channel, double[]> channels,
        CsvTable other,
        CsvTable main,
        string path,
        string name,
        List<WaveformProblem> problems)
    {
        bool same = other.Count == main.Count
            && Math.Abs(other.Time.Interval - main.Time.Interval) <= SameInterval * main.Time.Interval
            && Math.Abs(other.Time.Origin - main.Time.Origin) <= main.Time.Interval / 4;
        if (!same)
        {
            problems.Add(new WaveformProblem(
                path, 0, 0, Describe(other), $"the time base of {name}, {Describe(main)}", "record both together"));
        }

        foreach ((Channel channel, double[] samples) in other.Channels)
        {
            channels[channel] = samples;
        }
    }

    private static string Describe(CsvTable table) => string.Create(
        CultureInfo.InvariantCulture,
        $"{table.Count} samples of {table.Time.Interval:G6} s from {table.Time.Origin:G6} s");

    private static CsvTable? ReadPath(
        string path,
        WaveformFileOptions options,
        IReadOnlyList<ChannelMapping> mappings,
        List<WaveformProblem> problems)
    {
        if (Directory.Exists(path))
        {
            problems.Add(new WaveformProblem(path, 0, 0, "a directory", "a file", "name a file in it"));
            return null;
        }

        try
        {
            using FileStream file = new(path, FileMode.Open, FileAccess.Read, FileShare.Read, bufferSize: 0);
            return ReadStream(file, path, options, mappings, problems);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or ArgumentException
            or NotSupportedException)
        {
            string found = e is FileNotFoundException or DirectoryNotFoundException
                ? "there is no such file" : e.Message.TrimEnd('.');
            problems.Add(new WaveformProblem(path, 0, 0, found, "a file that can be read", "check the path"));
            return null;
        }
    }

    private static CsvTable? ReadStream(
        Stream stream,
        string name,
        WaveformFileOptions options,
        IReadOnlyList<ChannelMapping> mappings,
        List<WaveformProblem> problems)
    {
        long start = stream.CanSeek ? stream.Position : -1;
        byte[] front = new byte[2];
        int count = stream.ReadAtLeast(front, front.Length, throwOnEndOfStream: false);
        using PrefixedStream whole = new(front[..count], stream);
        bool packed = count == 2 && front[0] == 0x1F && front[1] == 0x8B;
        if (count == 2 && front is [0xFF, 0xFE] or [0xFE, 0xFF])
        {
            problems.Add(new WaveformProblem(name, 1, 1, "UTF-16 text", "UTF-8", "save it as UTF-8 or plain ASCII"));
            return null;
        }

        using Stream text = packed ? Unpacked(whole) : whole;
        try
        {
            int filled = 0;
            if (start >= 0 && stream.Length - start > WorthCounting)
            {
                stream.Position = start;
                using Stream counted = packed ? Unpacked(stream) : new PrefixedStream([], stream);
                filled = CsvLines.CountFilled(counted, options.MostBytes);
                stream.Position = start + count;
            }

            return CsvTable.Read(text, name, options, mappings, problems, filled);
        }
        catch (InvalidDataException e) when (packed)
        {
            string found = $"damaged gzip: {e.Message}";
            problems.Add(new WaveformProblem(name, 0, 0, found, "a whole file", "copy it again"));
            return null;
        }
    }

    // A file that was cut short shows only where the host sets System.IO.Compression.UseStrictValidation, as ours does.
    private static GZipStream Unpacked(Stream stream) =>
        new(stream, CompressionMode.Decompress, leaveOpen: true);
}
