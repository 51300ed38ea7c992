namespace FakeBench.Fixtures;

/// <summary>A uniform grid of samples around a train.</summary>
/// <param name="Start">Time of the first sample, s after the driver's first edge.</param>
/// <param name="Interval">Sample interval, s.</param>
/// <param name="Points">Samples.</param>
public sealed record Window(double Start, double Interval, int Points);
