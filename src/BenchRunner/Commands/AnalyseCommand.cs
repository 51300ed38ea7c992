using System.CommandLine;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Console;
using BenchRunner.Files;
using BenchRunner.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Files;

namespace BenchRunner.Commands;

/// <summary><c>analyse</c>: quantities of waveform files, no bench needed.</summary>
internal static class AnalyseCommand
{
    public static Command Build()
    {
        var files = new Argument<string[]>("waveform")
        {
            Description = "CSV files, plain or packed by gzip: a column t in seconds, then channels in V and A",
            Arity = ArgumentArity.OneOrMore,
        };
        var settings = new Option<string?>("--settings")
        {
            Description = "what is known of device and recording (YAML)",
        };
        var every = new Option<bool>("--every-definition")
        {
            Description = "every definition of the catalogue, not the chosen ones alone",
        };
        var interval = new Option<string?>("--interval")
        {
            Description = "sample interval in place of the file's times, e.g. 400 ps",
        };
        var channels = new Option<string[]>("--channel")
        {
            Description = "where a channel is: NAME=[FILE:]COLUMN; may repeat",
        };
        Option<bool> json = CommonOptions.Json();
        var command = new Command(
            "analyse", "quantities of waveforms, by stated definitions\n"
                + "Example: benchrunner analyse train.csv --every-definition")
        {
            files, settings, every, interval, channels, json,
        };
        command.SetAction(parsed =>
        {
            AnalysisSettings given = AnalysisInput.Settings(parsed.GetValue(settings), parsed.GetValue(every));
            WaveformFileOptions options = AnalysisInput.Options(
                parsed.GetValue(interval), parsed.GetValue(channels) ?? []);
            List<AnalysedFile> analysed =
                [.. parsed.GetRequiredValue(files).Select(file => Analyse(file, options, given))];
            if (parsed.GetValue(json))
            {
                AnalyseJson.Write(analysed);
            }
            else
            {
                analysed.SelectMany(AnalysisText.Lines).ToList().ForEach(System.Console.WriteLine);
            }

            return ExitCode.Done;
        });
        return command;
    }

    private static AnalysedFile Analyse(string file, WaveformFileOptions options, AnalysisSettings settings)
    {
        Signals.Traces.Waveform waveform = AnalysisInput.Waveform(file, options);
        AnalysisResult result = WaveformAnalysis.Analyse(waveform, settings);
        return new AnalysedFile(
            file, AnalysisInput.Sha256(file), waveform, result, WaveformFindings.Judge(waveform, result, settings));
    }
}
