using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tolerances;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Files;

namespace BenchRunner.Files;

/// <summary>A measured waveform file and a reference, compared and judged.</summary>
internal sealed record ComparedFiles(
    ComparedFile Measured,
    ComparedFile Reference,
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
        ComparedFile ours = ComparedFile.Read(measured.File, measured.Options);
        ComparedFile theirs = ComparedFile.Read(reference.File, reference.Options);
        if (!ours.Waveform.Channels.Any(theirs.Waveform.Has))
        {
            throw new InputException(
                $"{measured.File} and {reference.File} have no channel in common: the first has {ours.Channels}, the "
                    + $"second {theirs.Channels}; say where the channels are by --channel and --reference-channel.");
        }

        ComparisonResult result = WaveformComparison.Compare(
            ours.Waveform,
            measured.Settings,
            theirs.Waveform,
            reference.Settings,
            ComparisonVerdict.Wanted(tolerances));
        return new ComparedFiles(
            ours, theirs, tolerances, result, ComparisonVerdict.Judge(result, tolerances));
    }
}
