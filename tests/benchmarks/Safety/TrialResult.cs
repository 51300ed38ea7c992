namespace BenchRunner.Benchmarks;

/// <summary>What one failure led to.</summary>
/// <param name="Failure">Its name.</param>
/// <param name="OutputsOff">Time from the failure to all outputs off, s; null: they never went off.</param>
/// <param name="BusDown">Time from the failure to the bus below 60 V, s; null: it never fell.</param>
/// <param name="Discharge">What the bleeder needs for that from the bus voltage of the point, τ ln(V/60 V), s.</param>
internal sealed record TrialResult(string Failure, double? OutputsOff, double? BusDown, double Discharge);
