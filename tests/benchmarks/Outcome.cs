namespace BenchRunner.Benchmarks;

/// <summary>What measuring a work once gave.</summary>
/// <param name="Unit">Unit of the figures.</param>
/// <param name="Ours">Our figure; null: not measured.</param>
/// <param name="Peer">That of a general-purpose program in the same run; null: none, or not there.</param>
/// <param name="Floor">What the machine or the mathematics allow, in the same run; null: none.</param>
/// <param name="Missing">Why the row cannot be met whatever the figures say; null: nothing is wrong.</param>
/// <param name="Note">What was checked or chosen on the way.</param>
internal sealed record Outcome(
    string Unit, Figure? Ours, Figure? Peer = null, Figure? Floor = null, string? Missing = null, string? Note = null)
{
    /// <summary>Nothing measured, and why.</summary>
    public static Outcome Without(string unit, string reason) => new(unit, null, Missing: reason);
}
