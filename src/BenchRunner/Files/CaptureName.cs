namespace BenchRunner.Files;

/// <summary>Names one stored capture within an evidence file.</summary>
/// <param name="Device">Serial of the device.</param>
/// <param name="Run">Identity of the run.</param>
/// <param name="OperatingPoint">Name of the operating point.</param>
/// <param name="Number">Number of the capture there.</param>
internal sealed record CaptureName(string Device, string Run, string OperatingPoint, int Number);
