using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Files;

/// <summary>A waveform, of a file or of the evidence, with what was found in it.</summary>
/// <param name="File">The file it was read from.</param>
/// <param name="Sha256">SHA-256 of that file; of the stored traces where it is an evidence file.</param>
/// <param name="Waveform">The waveform as recorded.</param>
/// <param name="Settings">What the analysis took as given.</param>
/// <param name="Result">What the analysis says.</param>
/// <param name="Verdict">Findings.</param>
internal sealed record AnalysedFile(
    string File, string Sha256, Waveform Waveform, AnalysisSettings Settings, AnalysisResult Result, Verdict Verdict)
{
    /// <summary>Which stored capture it is; null: a waveform file.</summary>
    public CaptureName? Capture { get; init; }

    /// <summary>The lowest and the highest value that each channel's record can hold, V or A; where none is known, a
    /// clipped sample is an infinity or NaN.</summary>
    public IReadOnlyDictionary<Channel, (double Low, double High)> Rails { get; init; } =
        new Dictionary<Channel, (double, double)>();

    /// <summary>The name for people.</summary>
    public string Name => Capture is { } capture
        ? $"{File}: {capture.Device}, {capture.OperatingPoint}, capture {capture.Number}, run {capture.Run}"
        : File;
}
