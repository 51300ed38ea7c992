using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Plans;

/// <summary>What a run of one device will do, from the files alone.</summary>
/// <param name="Sequence">The sequence.</param>
/// <param name="Bench">The bench.</param>
/// <param name="Points">The points in the order in which they are run.</param>
/// <param name="Duration">Time that one device needs without retries, s.</param>
/// <param name="Bytes">Bytes of evidence that one device needs when every point takes all its captures.</param>
/// <remarks>Not to be confused with a permit: a plan says what is wanted, a permit what is allowed.</remarks>
public sealed record Plan(
    Sequence Sequence, Bench Bench, IReadOnlyList<PlannedPoint> Points, double Duration, long Bytes)
{
    /// <summary>
    /// The train that shows, below 60 V, that bench and device are what the files say; before and after the points.
    /// </summary>
    public required PlannedPoint Proving { get; init; }
}
