namespace BenchRunner.Acceptance.Uncertainty;

/// <summary>What the bench's stated errors do to one quantity (type B).</summary>
/// <param name="Quantity">The quantity.</param>
/// <param name="Definition">Its definition ID, route included.</param>
/// <param name="Entries">One entry for gain, offset, skew and quantisation of each channel recorded.</param>
/// <param name="Reason">Why a sensitivity could not be formed; null where all were.</param>
public sealed record QuantityBudget(
    string Quantity, string Definition, IReadOnlyList<UncertaintyEntry> Entries, string? Reason);
