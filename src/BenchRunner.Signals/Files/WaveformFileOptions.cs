namespace BenchRunner.Signals.Files;

/// <summary>How a waveform file is read where it is not in the house's own form; everything has a default.</summary>
public sealed record WaveformFileOptions
{
    /// <summary>The house's own form, unlimited but by the bounds below.</summary>
    public static WaveformFileOptions Default { get; } = new();

    /// <summary>Sample interval, s, in place of the file's time column; null: the file says it.</summary>
    public double? Interval { get; init; }

    /// <summary>Which columns hold which channels; with any, columns that nobody named are left aside.</summary>
    public IReadOnlyList<ChannelMapping> Channels { get; init; } = [];

    /// <summary>The most rows that are read.</summary>
    public int MostRows { get; init; } = 20_000_000;

    /// <summary>The most bytes that are read, unpacked: a packed file of a few bytes can hold any number.</summary>
    public long MostBytes { get; init; } = 4L << 30;
}
