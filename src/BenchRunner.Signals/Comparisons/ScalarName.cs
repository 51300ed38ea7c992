namespace BenchRunner.Signals.Comparisons;

/// <summary>A quantity that a comparison must hold.</summary>
/// <param name="Quantity">Name, e.g. <c>trr</c>.</param>
/// <param name="Definition">The definition's ID, with or without a route; null: the settings' or the default
/// one.</param>
public readonly record struct ScalarName(string Quantity, string? Definition);
