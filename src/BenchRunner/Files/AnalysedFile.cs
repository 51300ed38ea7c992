using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Files;

/// <summary>A waveform file with what was found in it.</summary>
internal sealed record AnalysedFile(
    string File, string Sha256, Waveform Waveform, AnalysisResult Result, Verdict Verdict);
