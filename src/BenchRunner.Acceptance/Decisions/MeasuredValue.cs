namespace BenchRunner.Acceptance.Decisions;

/// <summary>One quantity of one device at one operating point: value, uncertainty, and conformity if limited.</summary>
/// <param name="OperatingPoint">Name of the operating point.</param>
/// <param name="Quantity">The quantity.</param>
/// <param name="Definition">Its definition ID.</param>
/// <param name="Value">Mean over the valid captures, SI; null where it could not be formed.</param>
/// <param name="Unit">SI unit.</param>
/// <param name="StandardUncertainty">Combined standard uncertainty, SI.</param>
/// <param name="ExpandedUncertainty">Expanded uncertainty U = k u, SI.</param>
/// <param name="CoverageFactor">Coverage factor k.</param>
/// <param name="DegreesOfFreedom">Effective degrees of freedom (Welch-Satterthwaite); infinity is possible.</param>
/// <param name="Captures">Valid captures in which the quantity was formed.</param>
/// <param name="Lower">Lower limit; null: none.</param>
/// <param name="Upper">Upper limit; null: none.</param>
/// <param name="Conformity">Conformity; null where no limit stands.</param>
/// <param name="Reason">Why there is no value, or why it is undecided; null otherwise.</param>
public sealed record MeasuredValue(
    string OperatingPoint,
    string Quantity,
    string Definition,
    double? Value,
    string Unit,
    double? StandardUncertainty,
    double? ExpandedUncertainty,
    double? CoverageFactor,
    double? DegreesOfFreedom,
    int Captures,
    double? Lower,
    double? Upper,
    Conformity? Conformity,
    string? Reason);
