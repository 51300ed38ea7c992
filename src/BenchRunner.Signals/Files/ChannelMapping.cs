using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Files;

/// <summary>Where a channel is to be found: <c>NAME=[FILE:]COLUMN</c>.</summary>
/// <param name="Channel">The channel.</param>
/// <param name="File">The file that holds it; null: the waveform file itself.</param>
/// <param name="Column">The column's name in the header, or its number, from 1.</param>
public sealed record ChannelMapping(Channel Channel, string? File, string Column)
{
    /// <summary>Reads a mapping as a user writes it.</summary>
    /// <param name="text">E.g. <c>id_low=CH3</c>, <c>id_low=4</c>, <c>id_low=current.csv:2</c>.</param>
    /// <returns>The mapping, or the problem with the text.</returns>
    /// <remarks>The last colon parts file and column, so that a path may begin with a drive's letter.</remarks>
    public static (ChannelMapping? Mapping, WaveformProblem? Problem) Parse(string text)
    {
        ArgumentNullException.ThrowIfNull(text);
        int equals = text.IndexOf('=', StringComparison.Ordinal);
        string name = equals < 0 ? text : text[..equals];
        if (ChannelNames.Parse(name) is not { } channel)
        {
            return (null, Wrong(text, $"'{name}' is no channel", $"one of {Csv.Names}"));
        }

        string place = equals < 0 ? "" : text[(equals + 1)..];
        int colon = place.LastIndexOf(':');
        string column = place[(colon + 1)..];
        return column.Length == 0 || colon == 0
            ? (null, Wrong(text, $"'{text}' names no column", "NAME=COLUMN or NAME=FILE:COLUMN"))
            : (new ChannelMapping(channel, colon < 0 ? null : place[..colon], column), null);
    }

    private static WaveformProblem Wrong(string text, string found, string expected) =>
        new($"--channel {text}", 0, 0, found, expected, "write for instance --channel id_low=CH3");
}
