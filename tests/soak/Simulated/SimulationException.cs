namespace BenchRunner.Soak.Simulated;

/// <summary>A simulation did not come to its end as one should.</summary>
/// <param name="message">What was seen.</param>
internal sealed class SimulationException(string message) : Exception(message);
