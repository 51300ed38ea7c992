namespace BenchRunner.Safety;

/// <summary>Safety ended or refused the work: a trip, or no permit.</summary>
/// <param name="message">Why, and what to do.</param>
public sealed class SafetyException(string message) : Exception(message);
