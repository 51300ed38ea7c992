using System.CommandLine;
using BenchRunner.Console;
using BenchRunner.Evidence.Captures;
using BenchRunner.Files;
using BenchRunner.Json;
using BenchRunner.Plots;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Files;

namespace BenchRunner.Commands;

/// <summary><c>analyse</c>: quantities of waveform files, or of captures that the evidence holds; no bench
/// needed.</summary>
internal sealed class AnalyseCommand
{
    private readonly Argument<string[]> _files = new("waveform")
    {
        Description = "CSV files, plain or packed by gzip: a column t in seconds, then channels in V and A",
        Arity = ArgumentArity.ZeroOrMore,
    };

    private readonly Option<string?> _settings = new("--settings")
    {
        Description = "what is known of device and recording (YAML); of a stored capture in place of what its run knew",
    };

    private readonly Option<bool> _every = new("--every-definition")
    {
        Description = "every definition of the catalogue, not the chosen ones alone",
    };

    private readonly Option<string?> _interval = new("--interval")
    {
        Description = "sample interval in place of the file's times, e.g. 400 ps",
    };

    private readonly Option<string[]> _channels = new("--channel")
    {
        Description = "where a channel is: NAME=[FILE:]COLUMN; may repeat",
    };

    private readonly Option<string?> _evidence = CommonOptions.Evidence();

    private readonly Option<string?> _device = new("--device")
    {
        Description = "serial of the device whose stored capture is meant, in place of waveform files",
    };

    private readonly Option<string?> _capture = new("--capture")
    {
        Description = "number of the stored capture, as the view captures has it",
    };

    private readonly Option<string?> _run = new("--run")
    {
        Description = "run of the stored capture; without it the device's newest one",
    };

    private readonly Option<string?> _point = new("--operating-point")
    {
        Description = "operating point of the stored capture, also zero, proving-before or proving-after; "
            + "without it each one of the sequence",
    };

    private readonly Option<string?> _plot = new("--plot")
    {
        Description = "draws the traces of one waveform with its intervals into this file (.svg), which is replaced",
    };

    private readonly Option<bool> _json = CommonOptions.Json();

    private AnalyseCommand()
    {
    }

    public static Command Build()
    {
        AnalyseCommand options = new();
        var command = new Command(
            "analyse", "quantities of waveforms, by stated definitions\n"
                + "Example: benchrunner analyse train.csv --every-definition --plot train.svg\n"
                + "Example: benchrunner analyse voltages.csv --channel vds_low=CH1 --channel id_low=current.csv:CH2\n"
                + "Example: benchrunner analyse --evidence bench-evidence.db --device W1200-0001 --capture 3 "
                + "--operating-point rated")
        {
            options._files, options._settings, options._every, options._interval, options._channels,
            options._evidence, options._device, options._capture, options._run, options._point, options._plot,
            options._json,
        };
        command.SetAction(options.Do);
        return command;
    }

    private int Do(ParseResult parsed)
    {
        string[] files = parsed.GetValue(_files) ?? [];
        string? plot = parsed.GetValue(_plot);
        PlotFile.Check(plot, files);
        IReadOnlyList<AnalysedFile> analysed = files.Length > 0 ? OfFiles(parsed, files) : OfEvidence(parsed);
        if (plot is not null)
        {
            PlotFile.Write(plot, analysed);
        }

        if (parsed.GetValue(_json))
        {
            AnalyseJson.Write(analysed);
        }
        else
        {
            analysed.SelectMany(AnalysisText.Lines).ToList().ForEach(System.Console.WriteLine);
        }

        return ExitCode.Done;
    }

    private List<AnalysedFile> OfFiles(ParseResult parsed, IReadOnlyList<string> files)
    {
        Refuse(parsed, [_evidence, _device, _capture, _run, _point], "names a stored capture",
            "give waveform files or a stored capture, not both");
        AnalysisSettings settings = AnalysisInput.Settings(parsed.GetValue(_settings), parsed.GetValue(_every));
        WaveformFileOptions options = AnalysisInput.Options(
            parsed.GetValue(_interval), parsed.GetValue(_channels) ?? []);
        return [.. files.Select(file => AnalysisInput.Analyse(file, options, settings))];
    }

    private List<AnalysedFile> OfEvidence(ParseResult parsed)
    {
        CaptureChoice choice = CaptureChoice.Of(
            parsed.GetValue(_device), parsed.GetValue(_capture), parsed.GetValue(_run), parsed.GetValue(_point));
        Refuse(parsed, [_interval, _channels], "is about waveform files",
            "leave it out: the evidence knows the channels of a stored capture and their time base");
        string file = EvidenceFiles.ToRead(parsed.GetValue(_evidence));
        if (!File.Exists(file))
        {
            throw new InputException($"{file}: there is no such evidence file; name one that a run has written");
        }

        using EvidenceReader evidence = EvidenceReader.Open(file);
        StoredAnalysis stored = new(evidence, file);
        IReadOnlyList<FoundCapture> found = choice.Find(evidence, file, out string? note);
        if (note is not null)
        {
            System.Console.Error.WriteLine(note);
        }

        bool every = parsed.GetValue(_every);
        AnalysisSettings settings = parsed.GetValue(_settings) is { } named
            ? AnalysisInput.Settings(named, every)
            : stored.SettingsOf(found[0].Run);
        settings = settings with { EveryDefinition = settings.EveryDefinition || every };
        bool asStored = parsed.GetValue(_settings) is null;
        return [.. found.Select(one => stored.Analyse(choice.Device, one, settings, asStored))];
    }

    private static void Refuse(ParseResult parsed, IReadOnlyList<Option> options, string what, string advice)
    {
        if (options.FirstOrDefault(option => parsed.GetResult(option) is { Implicit: false }) is { } given)
        {
            throw new InputException($"{given.Name} {what}; {advice}");
        }
    }
}
