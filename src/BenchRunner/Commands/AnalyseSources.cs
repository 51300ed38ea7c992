using System.CommandLine;
using BenchRunner.Evidence.Captures;
using BenchRunner.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Files;

namespace BenchRunner.Commands;

/// <summary>Where <c>analyse</c> takes its waveforms from: files, or captures that the evidence holds.</summary>
internal static class AnalyseSources
{
    /// <summary>What is asked for, analysed.</summary>
    /// <exception cref="InputException">A file, an option or a choice of captures is wrong.</exception>
    public static IReadOnlyList<AnalysedFile> Read(AnalyseOptions options, ParseResult parsed) =>
        parsed.GetValue(options.Files) is { Length: > 0 } files
            ? OfFiles(options, parsed, files)
            : OfEvidence(options, parsed);

    private static List<AnalysedFile> OfFiles(
        AnalyseOptions options, ParseResult parsed, IReadOnlyList<string> files)
    {
        Refuse(
            parsed,
            [options.Evidence, options.Device, options.Capture, options.Run, options.Point],
            "names a stored capture",
            "give waveform files or a stored capture, not both");
        AnalysisSettings settings = AnalysisInput.Settings(
            parsed.GetValue(options.Settings), parsed.GetValue(options.Every));
        WaveformFileOptions reading = AnalysisInput.Options(
            parsed.GetValue(options.Interval), parsed.GetValue(options.Channels) ?? []);
        return [.. files.Select(file => AnalysisInput.Analyse(file, reading, settings))];
    }

    private static List<AnalysedFile> OfEvidence(AnalyseOptions options, ParseResult parsed)
    {
        CaptureChoice choice = CaptureChoice.Of(
            parsed.GetValue(options.Device),
            parsed.GetValue(options.Capture),
            parsed.GetValue(options.Run),
            parsed.GetValue(options.Point));
        Refuse(
            parsed,
            [options.Interval, options.Channels],
            "is about waveform files",
            "leave it out: the evidence knows the channels of a stored capture and their time base");
        string file = EvidenceFiles.ToRead(parsed.GetValue(options.Evidence));
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

        bool every = parsed.GetValue(options.Every);
        AnalysisSettings settings = parsed.GetValue(options.Settings) is { } named
            ? AnalysisInput.Settings(named, every)
            : stored.SettingsOf(found[0].Run);
        settings = settings with { EveryDefinition = settings.EveryDefinition || every };
        bool asStored = parsed.GetValue(options.Settings) is null;
        return [.. found.Select(one => stored.Analyse(choice.Device, one, settings, asStored))];
    }

    private static void Refuse(ParseResult parsed, IReadOnlyList<Option> others, string what, string advice)
    {
        if (others.FirstOrDefault(option => parsed.GetResult(option) is { Implicit: false }) is { } given)
        {
            throw new InputException($"{given.Name} {what}; {advice}");
        }
    }
}
