namespace BenchRunner.Signals.Ringing;

/// <summary>What a ring fit found: the modes, or the reason why there are none.</summary>
/// <param name="Modes">Ringing modes first, then heavily damped ones, each group by falling strength; empty where there
/// is a reason.</param>
/// <param name="Offset">Constant c of the model at the first sample, in the samples' unit.</param>
/// <param name="Slope">Slope d of the model, the samples' unit a second.</param>
/// <param name="ResidualRms">Root mean square of samples less model, in the samples' unit.</param>
/// <param name="Reason">Why no ring was found; null where there is one.</param>
public sealed record RingFitResult(
    IReadOnlyList<RingMode> Modes,
    double Offset,
    double Slope,
    double ResidualRms,
    string? Reason)
{
    /// <summary>Number of modes, 0 to 3.</summary>
    public int Order => Modes.Count;

    /// <summary>The strongest ringing mode; null where there is a reason.</summary>
    public RingMode? Strongest => Modes.Count > 0 ? Modes[0] : null;

    internal static RingFitResult None(string reason) => new([], 0, 0, 0, reason);
}
