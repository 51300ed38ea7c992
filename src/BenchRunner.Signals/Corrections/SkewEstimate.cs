namespace BenchRunner.Signals.Corrections;

/// <summary>By how much one channel is later than another, told by the record itself.</summary>
/// <param name="Skew">How much later, s; null where it could not be told.</param>
/// <param name="StandardUncertainty">Standard uncertainty of the skew, s: noise and model together; null where there is
/// no skew.</param>
/// <param name="LoopInductance">The loop's inductance that goes with it, H; null where none was fitted.</param>
/// <param name="Reason">Why there is no skew; null where there is one.</param>
public sealed record SkewEstimate(
    double? Skew, double? StandardUncertainty, double? LoopInductance, string? Reason)
{
    /// <summary>No skew, and why.</summary>
    /// <param name="reason">Why.</param>
    public static SkewEstimate None(string reason) => new(null, null, null, reason);
}
