using BenchRunner.Signals.Analysis;

namespace BenchRunner.Runner.Points;

/// <summary>What firing at one operating point gave its cases.</summary>
public abstract record PointTaken
{
    private PointTaken()
    {
    }

    /// <summary>Captures were taken; enough of them are valid or not, the decision says.</summary>
    /// <param name="Valid">The valid captures, in the order taken.</param>
    /// <param name="Taken">How many were taken in all.</param>
    public sealed record Captured(IReadOnlyList<ValidCapture> Valid, int Taken) : PointTaken;

    /// <summary>The point was not fired at, or broken off.</summary>
    /// <param name="Why">Why.</param>
    public sealed record NotReached(string Why) : PointTaken;
}

/// <summary>A valid capture with what the analysis made of it.</summary>
/// <param name="Number">Its number at the operating point, from 1.</param>
/// <param name="Waveform">Its channels, V and A, not yet corrected.</param>
/// <param name="Result">Facts and quantities.</param>
public sealed record ValidCapture(int Number, Signals.Traces.Waveform Waveform, AnalysisResult Result);
