namespace BenchRunner.Acceptance.Sequences;

/// <summary>What a sound device is expected to do: ranges and sampling are planned by it, nothing decided.</summary>
/// <param name="FastestEdge">Shortest edge, s.</param>
/// <param name="RingFrequency">Ring frequency, Hz.</param>
/// <param name="OnVoltage">On-state voltage at the rated current, V.</param>
/// <param name="ForwardVoltage">Forward voltage of the freewheeling diode, V.</param>
public sealed record ExpectedBehaviour(
    double FastestEdge, double RingFrequency, double OnVoltage, double ForwardVoltage);
