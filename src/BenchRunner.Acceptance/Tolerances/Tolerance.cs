using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Tolerances;

/// <summary>How far a quantity of a measured waveform may lie from that of the reference.</summary>
/// <param name="Quantity">The quantity, e.g. <c>trr</c>.</param>
/// <param name="Definition">The definition ID asked for; null: the default one.</param>
/// <param name="Within">Largest relative error, either way, 1.</param>
/// <param name="Where">Where it stands in the file.</param>
public sealed record Tolerance(string Quantity, string? Definition, double Within, Place Where);
