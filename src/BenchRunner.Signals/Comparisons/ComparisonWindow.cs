namespace BenchRunner.Signals.Comparisons;

/// <summary>The stretch over which two waveforms are compared, on the measured record's time axis.</summary>
/// <param name="From">Its start, s.</param>
/// <param name="To">Its end, s.</param>
/// <param name="Meaning">What it is, e.g. <c>on2's departure to the end of the ringing</c>.</param>
public sealed record ComparisonWindow(double From, double To, string Meaning);
