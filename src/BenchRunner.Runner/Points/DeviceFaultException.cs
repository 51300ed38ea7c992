namespace BenchRunner.Runner.Points;

/// <summary>The device was found faulty beside any capture: it is rejected, and the bench is made safe in good
/// order.</summary>
/// <param name="message">What was found.</param>
public sealed class DeviceFaultException(string message) : Exception(message);
