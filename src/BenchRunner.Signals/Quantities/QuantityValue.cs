namespace BenchRunner.Signals.Quantities;

/// <summary>One quantity of one waveform by one definition: a value, or the reason why there is none.</summary>
/// <param name="Quantity">Name, e.g. <c>qrr</c>.</param>
/// <param name="Definition">ID of the rule that formed it, e.g. <c>qrr/chord-90-25@id_low-iL</c>.</param>
/// <param name="Value">The value in <paramref name="Unit"/>, SI; null where it could not be formed.</param>
/// <param name="Unit">SI unit, e.g. <c>C</c>; <c>1</c> for a ratio.</param>
/// <param name="Reason">Why there is no value; null where there is one.</param>
/// <param name="From">Start of the interval the value rests on, s; null where there is none.</param>
/// <param name="To">End of that interval, s; null where there is none.</param>
public sealed record QuantityValue(
    string Quantity,
    string Definition,
    double? Value,
    string Unit,
    string? Reason,
    double? From,
    double? To)
{
    /// <summary>Of an energy: its change per second by which the current is recorded late against the voltage, W
    /// (1 W is 1 nJ/ns), from the record itself; null for every other quantity.</summary>
    public double? PerSkew { get; init; }
}
