using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tolerances;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Files;

/// <summary>A measured waveform file and a reference, compared and judged.</summary>
internal sealed record ComparedFiles(
    string Measured,
    string Reference,
    Waveform MeasuredWaveform,
    Waveform ReferenceWaveform,
    ToleranceSet Tolerances,
    ComparisonResult Result,
    ComparisonVerdict Verdict)
{
    /// <summary>Reads both files and the tolerances, compares and judges.</summary>
    /// <exception cref="InputException">A file is wrong, or the two have no channel in common.</exception>
    public static ComparedFiles Read(
        (string File, WaveformFileOptions Options, AnalysisSettings Settings) measured,
        (string File, WaveformFileOptions Options, AnalysisSettings Settings) reference,
        string? tolerancesPath)
    {
        Read<ToleranceSet> read = TolerancesFile.Read(ExampleFiles.Find(tolerancesPath ?? ExampleFiles.Tolerances));
        ToleranceSet tolerances = read.Value
            ?? throw new InputException(string.Join(Environment.NewLine, read.Problems));
        Waveform ours = AnalysisInput.Waveform(measured.File, measured.Options);
        Waveform theirs = AnalysisInput.Waveform(reference.File, reference.Options);
        if (!ours.Channels.Any(theirs.Has))
        {
            throw new InputException(
                $"{measured.File} and {reference.File} have no channel in common: the first has {Names(ours)}, the "
                    + $"second {Names(theirs)}; say where the channels are by --channel and --reference-channel.");
        }

        ComparisonResult result = WaveformComparison.Compare(
            ours, measured.Settings, theirs, reference.Settings, ComparisonVerdict.Wanted(tolerances));
        return new ComparedFiles(
            measured.File, reference.File, ours, theirs, tolerances, result,
            ComparisonVerdict.Judge(result, tolerances));
    }

    private static string Names(Waveform waveform) =>
        string.Join(' ', waveform.Channels.Select(channel => channel.Name()));
}
