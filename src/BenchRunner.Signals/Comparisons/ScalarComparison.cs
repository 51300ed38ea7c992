using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Comparisons;

/// <summary>One quantity of two waveforms by one definition.</summary>
/// <param name="Quantity">Name, e.g. <c>trr</c>.</param>
/// <param name="Definition">ID of the rule that formed both values.</param>
/// <param name="Unit">SI unit; <c>1</c> for a ratio.</param>
/// <param name="Reference">Value of the reference; null where it could not be formed.</param>
/// <param name="Measured">Value of the measured waveform; null where it could not be formed.</param>
/// <param name="RelativeError">(measured − reference)/reference, 1; null where there is none.</param>
/// <param name="Reason">Why there is no error; null where there is one.</param>
public sealed record ScalarComparison(
    string Quantity,
    string Definition,
    string Unit,
    double? Reference,
    double? Measured,
    double? RelativeError,
    string? Reason)
{
    /// <summary>Compares two values.</summary>
    /// <param name="measured">The measured waveform's.</param>
    /// <param name="reference">The reference's.</param>
    public static ScalarComparison Form(QuantityValue measured, QuantityValue reference)
    {
        ArgumentNullException.ThrowIfNull(measured);
        ArgumentNullException.ThrowIfNull(reference);
        bool isSame = measured.Definition == reference.Definition;
        double? error = (measured.Value - reference.Value) / reference.Value;
        string? reason =
            !isSame ? $"formed by {measured.Definition} here and by {reference.Definition} in the reference"
            : measured.Reason is { } here ? $"measured: {here}"
            : reference.Reason is { } there ? $"reference: {there}"
            : double.IsFinite(error ?? double.NaN) ? null
            : "the reference's value is zero";
        return new ScalarComparison(
            measured.Quantity,
            measured.Definition,
            measured.Unit,
            isSame ? reference.Value : null,
            measured.Value,
            reason is null ? error : null,
            reason);
    }
}
