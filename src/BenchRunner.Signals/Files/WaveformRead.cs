using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Files;

/// <summary>What reading a waveform file gave: the waveform, or the problems.</summary>
/// <param name="Waveform">The waveform; null where there are problems.</param>
/// <param name="Problems">The problems, at most <see cref="MostProblems"/>; empty where there is a waveform.</param>
public sealed record WaveformRead(Waveform? Waveform, IReadOnlyList<WaveformProblem> Problems)
{
    /// <summary>Reading stops when so many problems were found: the rest would say the same again.</summary>
    public const int MostProblems = 20;
}
