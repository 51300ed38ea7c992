using System.CommandLine;
using BenchRunner.Console;
using BenchRunner.Files;
using BenchRunner.Json;
using BenchRunner.Plots;

namespace BenchRunner.Commands;

/// <summary><c>analyse</c>: quantities of waveform files, or of captures that the evidence holds; no bench
/// needed.</summary>
internal static class AnalyseCommand
{
    public static Command Build()
    {
        AnalyseOptions options = new();
        var command = new Command(
            "analyse", "quantities of waveforms, by stated definitions\n"
                + "Example: benchrunner analyse train.csv --every-definition --plot train.svg\n"
                + "Example: benchrunner analyse voltages.csv --channel vds_low=CH1 --channel id_low=current.csv:CH2\n"
                + "Example: benchrunner analyse --evidence bench-evidence.db --device W1200-0001 --capture 3 "
                + "--operating-point rated");
        command.Add(options.Files);
        options.All.ToList().ForEach(command.Add);
        command.SetAction(parsed => Do(options, parsed));
        return command;
    }

    private static int Do(AnalyseOptions options, ParseResult parsed)
    {
        string? plot = parsed.GetValue(options.Plot);
        PlotFile.Check(plot, parsed.GetValue(options.Files) ?? []);
        IReadOnlyList<AnalysedFile> analysed = AnalyseSources.Read(options, parsed);
        if (plot is not null)
        {
            PlotFile.Write(plot, analysed);
        }

        if (parsed.GetValue(options.Json))
        {
            AnalyseJson.Write(analysed);
        }
        else
        {
            analysed.SelectMany(AnalysisText.Lines).ToList().ForEach(System.Console.WriteLine);
        }

        return ExitCode.Done;
    }
}
