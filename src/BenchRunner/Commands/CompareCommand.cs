using System.CommandLine;
using BenchRunner.Console;
using BenchRunner.Files;
using BenchRunner.Json;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Commands;

/// <summary><c>compare</c>: a measured waveform held against a reference, inside or outside stated
/// tolerances.</summary>
internal static class CompareCommand
{
    public static Command Build()
    {
        var file = new Argument<string>("waveform") { Description = "the measured waveform, as analyse reads it" };
        var reference = new Option<string>("--reference")
        {
            Description = "the waveform that it is held against",
            Required = true,
        };
        var tolerances = new Option<string?>("--tolerances")
        {
            Description = $"how well they must agree (YAML); without it {ExampleFiles.Tolerances}",
        };
        Option<string?> settings = Text("--settings", "what is known of the measured waveform (YAML)");
        Option<string?> referenceSettings = Text(
            "--reference-settings", "what is known of the reference; without it the measured one's, corrections aside");
        Option<string?> interval = Text("--interval", "sample interval in place of the file's times, e.g. 400 ps");
        Option<string?> referenceInterval = Text("--reference-interval", "the same for the reference");
        Option<string[]> channels = Channels("--channel", "where a channel is: NAME=[FILE:]COLUMN; may repeat");
        Option<string[]> referenceChannels = Channels("--reference-channel", "the same for the reference");
        Option<bool> json = CommonOptions.Json();
        var command = new Command(
            "compare", "a measured waveform held against a reference: errors, inside or outside the tolerances\n"
                + "Example: benchrunner compare train.csv --reference model.csv")
        {
            file, reference, tolerances, settings, referenceSettings, interval, referenceInterval, channels,
            referenceChannels, json,
        };
        command.SetAction(parsed =>
        {
            AnalysisSettings known = AnalysisInput.Settings(parsed.GetValue(settings), everyDefinition: false);
            AnalysisSettings theirs = parsed.GetValue(referenceSettings) is { } path
                ? AnalysisInput.Settings(path, everyDefinition: false)
                : known.WithoutCorrections();
            ComparedFiles compared = ComparedFiles.Read(
                (parsed.GetRequiredValue(file),
                    AnalysisInput.Options(parsed.GetValue(interval), parsed.GetValue(channels) ?? []), known),
                (parsed.GetRequiredValue(reference),
                    AnalysisInput.Options(
                        parsed.GetValue(referenceInterval),
                        parsed.GetValue(referenceChannels) ?? [],
                        referenceInterval.Name),
                    theirs),
                parsed.GetValue(tolerances));
            if (parsed.GetValue(json))
            {
                CompareJson.Write(compared);
            }
            else
            {
                CompareText.Lines(compared).ToList().ForEach(System.Console.WriteLine);
            }

            return compared.Verdict.IsInside ? ExitCode.Done : ExitCode.Rejected;
        });
        return command;
    }

    private static Option<string?> Text(string name, string meaning) => new(name) { Description = meaning };

    private static Option<string[]> Channels(string name, string meaning) => new(name) { Description = meaning };
}
