using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>A lower and/or upper bound on a quantity at an operating point.</summary>
/// <param name="Quantity">The quantity, e.g. <c>qrr</c>.</param>
/// <param name="Definition">The definition ID asked for; null: the default of kind and bench.</param>
/// <param name="At">Name of the operating point.</param>
/// <param name="Lower">Lower bound in SI; null: none.</param>
/// <param name="Upper">Upper bound in SI; null: none.</param>
/// <param name="ElseSkipHigher">Whether the higher points are left out when this limit fails.</param>
/// <param name="Where">Where the limit stands in the file.</param>
public sealed record Limit(
    string Quantity, string? Definition, string At, double? Lower, double? Upper, bool ElseSkipHigher, Place Where);
