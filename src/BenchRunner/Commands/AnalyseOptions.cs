using System.CommandLine;

namespace BenchRunner.Commands;

/// <summary>What <c>analyse</c> can be told.</summary>
internal sealed class AnalyseOptions
{
    public Argument<string[]> Files { get; } = new("waveform")
    {
        Description = "CSV files, plain or packed by gzip: a column t in seconds, then channels in V and A",
        Arity = ArgumentArity.ZeroOrMore,
    };

    public Option<string?> Settings { get; } = new("--settings")
    {
        Description = "what is known of device and recording (YAML); of a stored capture in place of what its run knew",
    };

    public Option<bool> Every { get; } = new("--every-definition")
    {
        Description = "every definition of the catalogue, not the chosen ones alone",
    };

    public Option<string?> Interval { get; } = new("--interval")
    {
        Description = "sample interval in place of the file's times, e.g. 400 ps",
    };

    public Option<string[]> Channels { get; } = new("--channel")
    {
        Description = "where a channel is: NAME=[FILE:]COLUMN; may repeat",
    };

    public Option<string?> Evidence { get; } = CommonOptions.Evidence();

    public Option<string?> Device { get; } = new("--device")
    {
        Description = "serial of the device whose stored capture is meant, in place of waveform files",
    };

    public Option<string?> Capture { get; } = new("--capture")
    {
        Description = "number of the stored capture, as the view captures has it",
    };

    public Option<string?> Run { get; } = new("--run")
    {
        Description = "run of the stored capture; without it the device's newest one",
    };

    public Option<string?> Point { get; } = new("--operating-point")
    {
        Description = "operating point of the stored capture, also zero, proving-before or proving-after; "
            + "without it each one of the sequence",
    };

    public Option<string?> Plot { get; } = new("--plot")
    {
        Description = "draws the traces of one waveform with its intervals into this file (.svg), which is replaced",
    };

    public Option<bool> Json { get; } = CommonOptions.Json();

    /// <summary>All of them, in the order of the help.</summary>
    public Option[] All =>
        [Settings, Every, Interval, Channels, Evidence, Device, Capture, Run, Point, Plot, Json];
}
